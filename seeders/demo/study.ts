import type { Actor } from '../../src/lib/domain/actor';
import { listCriteriaSets } from '../../src/lib/server/services/criteria-sets';
import { pastePanel } from '../../src/lib/server/services/panels';
import { createStudy } from '../../src/lib/server/services/studies';
import { workingCriteria } from '../library/criteria-sets';
import { demoExperiments } from './experiments';
import type { SeededLab } from './labs';
import { demoPanel } from './panel';
import { assignStandards, type PanelIds } from './panel-ids';
import { demoVariants } from './procedures';
import { seedCalibration, seedExperiment, seedVariant, type Bench } from './study-work';
import { sampleVolumeMl } from './truth';

export const demoStudyCode = 'TARROW-1';

/** The id of the criteria set that the demo studies are held against. */
export async function workingCriteriaId(actor: Actor): Promise<string> {
  const set = (await listCriteriaSets(actor)).find(({ name }) => name === workingCriteria.name);
  if (!set) throw new Error(`the library has no criteria set ${workingCriteria.name}`);
  return set.id;
}

/** Creates the demo study with its panel. */
async function createDemoStudy(chemist: Actor): Promise<PanelIds> {
  const namesOf = (role: string) =>
    demoPanel.flatMap((analyte) => (analyte.role === role ? [analyte.name] : [])).join('\n');
  await createStudy(chemist, {
    code: demoStudyCode,
    title: 'Polar and volatile organics at the Tarrow intake',
    matrix: 'river-intake water',
    objective:
      'One extraction for bases, acids, neutrals, phenols and amines at 400 ng/L, so that the intake can be watched ' +
      'with one sample. Invented study with invented data.',
    sampleVolumeMl,
    criteriaSetId: await workingCriteriaId(chemist),
    panelText: namesOf('target'),
    panelRole: 'target'
  });
  for (const role of ['surrogate', 'injection internal standard'] as const) {
    await pastePanel(chemist, demoStudyCode, { text: namesOf(role), role });
  }
  return assignStandards(chemist, demoStudyCode, demoPanel);
}

/** Builds the demo study as its people would have: planned by the chemist, measured and brought in by the analyst. */
export async function seedDemoStudy(lab: SeededLab): Promise<void> {
  const bench: Bench = { studyCode: demoStudyCode, chemist: lab.as('chemist'), analyst: lab.as('analyst') };
  const ids = await createDemoStudy(bench.chemist);
  for (const variant of demoVariants) await seedVariant(bench, variant);
  for (const calibration of [0, 1] as const) {
    const setId = await seedCalibration(bench, ids, calibration);
    const served = demoExperiments.filter((planned) => planned.calibration === calibration);
    for (const [index, experiment] of served.entries()) {
      await seedExperiment(bench, ids, { setId, levelsInRun: index === 0 }, experiment);
    }
  }
}
