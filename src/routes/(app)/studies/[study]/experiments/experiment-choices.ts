import type { Actor } from '$lib/domain/actor';
import { getCalibrationSets } from '$lib/server/services/calibrations';
import { listAnalysts } from '$lib/server/services/experiments';
import { getPanel } from '$lib/server/services/panels';
import { getStudy } from '$lib/server/services/studies';
import { listVariants } from '$lib/server/services/variants';
import type { ExperimentChoices } from './experiment-fields';

/** What a study offers to choose from when an experiment is planned or changed. */
export async function experimentChoices(actor: Actor, code: string): Promise<ExperimentChoices> {
  const panel = await getPanel(actor, code);
  const { stages } = await getStudy(actor, code);
  const sets = await getCalibrationSets(actor, code);
  const variants = await listVariants(actor, code);
  return {
    panel: panel.map(({ id, role, analyte }) => ({ id, role, name: analyte.name })),
    stages: stages.map(({ key, name }) => ({ key, name })),
    analysts: await listAnalysts(actor),
    calibrationSets: sets.map(({ id, name }) => ({ id, name })),
    variants: variants.map(({ code: variantCode, name }) => ({ code: variantCode, name }))
  };
}
