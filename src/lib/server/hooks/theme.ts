import type { Handle } from '@sveltejs/kit';
import { parseTheme, themeCookie } from '../../domain/theme';

/** Puts the chosen theme on the root element, so that the first byte already has the right colours. */
export const applyTheme: Handle = ({ event, resolve }) => {
  const theme = parseTheme(event.cookies.get(themeCookie));
  return resolve(event, { transformPageChunk: ({ html }) => html.replace('%headwater.theme%', theme) });
};
