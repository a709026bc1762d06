import { memberIn } from '$lib/server/hooks/member-in';
import { startPage } from '$lib/server/services/start-page';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async ({ locals }) => startPage(memberIn(locals));
