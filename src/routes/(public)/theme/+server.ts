import { redirect } from '@sveltejs/kit';
import { parseTheme, themeCookie } from '$lib/domain/theme';
import type { RequestHandler } from './$types';

/** The colour switch for browsers without JavaScript: keeps the choice and goes back to the page it came from. */
export const POST: RequestHandler = async ({ request, cookies, url }) => {
  const form = await request.formData();
  cookies.set(themeCookie, parseTheme(form.get('theme')), {
    path: '/',
    maxAge: 31_536_000,
    sameSite: 'lax',
    httpOnly: false,
    secure: url.protocol === 'https:'
  });
  redirect(303, localPath(form.get('back'), url));
};

/** A path of this site only: an address that leads elsewhere is answered with the start page. */
function localPath(back: unknown, here: URL): string {
  if (typeof back !== 'string' || !back.startsWith('/')) return '/';
  const target = URL.canParse(back, here) ? new URL(back, here) : here;
  return target.origin === here.origin && target !== here ? target.pathname + target.search : '/';
}
