import { isAllowed } from '$lib/domain/permissions';
import { memberIn } from '$lib/server/hooks/member-in';
import type { LayoutServerLoad } from './$types';

export const load: LayoutServerLoad = ({ locals }) => ({
  mayEdit: isAllowed(memberIn(locals).role, 'library.edit')
});
