import { memberIn } from '$lib/server/hooks/member-in';
import { listVariants } from '$lib/server/services/variants';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals, params, url }) => ({
  variants: await listVariants(memberIn(locals), params.study),
  isRemoved: url.searchParams.has('removed')
});
