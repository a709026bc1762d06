import { isAllowed } from '$lib/domain/permissions';
import { memberIn } from '$lib/server/hooks/member-in';
import { getStudy } from '$lib/server/services/studies';
import type { LayoutServerLoad } from './$types';

export const load: LayoutServerLoad = async ({ locals, params }) => {
  const actor = memberIn(locals);
  const { code, title, state, isOpen, revision, counts, stages, matrix } = await getStudy(
    actor,
    params.study
  );
  return {
    openedAt: new Date().toISOString(),
    study: { code, title, state, isOpen, revision, counts, stages, matrix },
    /** What the member may do here now: their role allows it and the study is open. */
    may: {
      plan: isOpen && isAllowed(actor.role, 'studies.edit'),
      exclude: isOpen && isAllowed(actor.role, 'data.exclude'),
      enter: isOpen && isAllowed(actor.role, 'data.enter'),
      calibrate: isOpen && isAllowed(actor.role, 'calibrations.choose')
    }
  };
};
