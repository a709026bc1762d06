import type { Actor } from '../../src/lib/domain/actor';
import type { ValidationPartKey } from '../../src/lib/domain/validation-parts';
import type { ReplicateKind } from '../../src/lib/domain/vocabulary';
import { createCalibrationSet } from '../../src/lib/server/services/calibrations';
import { listCriteriaSets } from '../../src/lib/server/services/criteria-sets';
import { exclude } from '../../src/lib/server/services/exclusions';
import { createExperiment, getExperiment } from '../../src/lib/server/services/experiments';
import { pastePanel } from '../../src/lib/server/services/panels';
import { createStudy } from '../../src/lib/server/services/studies';
import { chooseValidationEvidence, declareDuplicates } from '../../src/lib/server/services/validation';
import { chooseStageEvidence, createVariant } from '../../src/lib/server/services/variants';
import type { SeededLab } from './labs';
import { simulateLowExperiment, simulateLowLevels } from './low-level-generator';
import {
  lowLevelExperiments,
  lowLevelLabel,
  lowLevelPanel,
  lowLevelRecovered,
  lowLevelsNgPerMl,
  lowLevelStudyCode,
  lowSampleVolumeMl,
  lowStandardNg,
  lowStandardNgPerMl,
  lowSurrogateNg,
  type LowLevelExperiment
} from './low-level-plan';
import { assignStandards, idOf, type PanelIds } from './panel-ids';
import { upload } from './upload';
import { writeWorkbook } from './workbooks';

const variantCode = 'E';
const standards = lowLevelPanel.filter(({ role }) => role === 'injection internal standard');

async function createLowLevelStudy(chemist: Actor): Promise<PanelIds> {
  const namesOf = (role: string): string =>
    lowLevelPanel.flatMap((analyte) => (analyte.role === role ? [analyte.name] : [])).join('\n');
  const criteria = (await listCriteriaSets(chemist)).find(
    ({ name }) => name === 'Initial demonstration of EPA 539'
  );
  if (!criteria) throw new Error('the library has no criteria for an initial demonstration');
  await createStudy(chemist, {
    code: lowLevelStudyCode,
    title: 'What the two-elution procedure can do in reagent water',
    matrix: 'reagent water',
    objective:
      'Limits, precision and an initial demonstration of the mixed-mode procedure with both elutions in one extract, ' +
      'down to 10 ng/L. Invented study with invented data.',
    sampleVolumeMl: lowSampleVolumeMl,
    criteriaSetId: criteria.id,
    panelText: namesOf('target'),
    panelRole: 'target'
  });
  for (const role of ['surrogate', 'injection internal standard'] as const) {
    await pastePanel(chemist, lowLevelStudyCode, { text: namesOf(role), role });
  }
  await createVariant(chemist, lowLevelStudyCode, {
    code: variantCode,
    name: 'Mixed-mode polymer at pH 7, elutions combined',
    description: 'As the two-elution variant of the first study, both elutions collected in one flask.'
  });
  return assignStandards(chemist, lowLevelStudyCode, lowLevelPanel);
}

function spikesOf({ portions, spikeNg }: LowLevelExperiment) {
  return [...new Set(portions.map(({ kind }) => kind))].map((kind) => {
    const late = kind === 'post-extraction spike' || kind === 'solvent standard';
    return {
      kind,
      targetsNg: kind === 'unspiked' || kind === 'method blank' ? null : spikeNg,
      surrogatesNg: late ? null : lowSurrogateNg,
      extractionStandardsNg: null,
      entries: {}
    };
  });
}

async function seedLowExperiment(
  lab: SeededLab,
  ids: PanelIds,
  calibrationSetId: string,
  experiment: LowLevelExperiment
): Promise<number> {
  const [chemist, analyst] = [lab.as('chemist'), lab.as('analyst')];
  const kinds: readonly ReplicateKind[] = [...new Set(experiment.portions.map(({ kind }) => kind))];
  const number = await createExperiment(chemist, lowLevelStudyCode, {
    stageKey: 'extraction',
    title: experiment.title,
    medium: experiment.medium,
    matrix: experiment.matrix,
    levelLabel: `${experiment.spikeNg} ng`,
    subtract: experiment.subtract,
    performedOn: experiment.performedOn,
    analystId: analyst.userId,
    calibrationSetId,
    sampleVolumeMl: lowSampleVolumeMl,
    finalVolumeMl: null,
    spikes: spikesOf(experiment),
    additions: standards.map(({ name }) => ({
      panelEntryId: idOf(ids, name),
      point: 'extract' as const,
      amountNg: lowStandardNg,
      concentrationNgPerMl: null
    })),
    fractions: [
      {
        id: null,
        name: 'Extract',
        kind: 'elution' as const,
        countsAs: 'method' as const,
        passedStages: ['drying', 'concentration']
      }
    ],
    replicates: kinds.map((kind) => {
      const labels = experiment.portions.filter((portion) => portion.kind === kind).map(({ label }) => label);
      return {
        kind,
        count: labels.length,
        batch: '',
        sampleVolumeMl: lowSampleVolumeMl,
        labels: labels.join('\n')
      };
    }),
    variantCode: ''
  });
  const vials = [...(number === 1 ? simulateLowLevels() : []), ...simulateLowExperiment(experiment)];
  await upload(analyst, lowLevelStudyCode, {
    fileName: `run-${experiment.performedOn}-${experiment.key.toLowerCase()}.xlsx`,
    bytes: await writeWorkbook('Invented demo data', 'wide', vials, lowLevelRecovered),
    experimentNumber: number
  });
  const { replicates } = await getExperiment(analyst, lowLevelStudyCode, number);
  for (const { label, mishap } of experiment.portions) {
    const replicate = replicates.find((candidate) => candidate.label === label);
    if (!mishap || !replicate) continue;
    await exclude(analyst, lowLevelStudyCode, number, {
      replicateId: replicate.id,
      fractionId: null,
      analyteId: null,
      cause: mishap.cause
    });
  }
  return number;
}

/** The study of limits and precision: an initial demonstration, three low batches with their blanks, matrix spikes. */
export async function seedLowLevelStudy(lab: SeededLab): Promise<void> {
  const chemist = lab.as('chemist');
  const ids = await createLowLevelStudy(chemist);
  const calibrationSetId = await createCalibrationSet(chemist, lowLevelStudyCode, {
    name: 'Low calibration',
    instrument: 'Liquid and gas chromatograph, one table',
    calibratedOn: '2026-11-09',
    defaultModel: 'linear',
    defaultWeighting: '1/x',
    levels: lowLevelsNgPerMl.map((concentrationNgPerMl, level) => ({
      label: lowLevelLabel(level),
      concentrationNgPerMl
    })),
    factors: {},
    constants: Object.fromEntries(standards.map(({ name }) => [idOf(ids, name), lowStandardNgPerMl])),
    concentrations: {}
  });
  for (const experiment of lowLevelExperiments) {
    await seedLowExperiment(lab, ids, calibrationSetId, experiment);
  }
  for (const [experimentNumber, matrix] of [
    [1, ''],
    [5, 'river-intake water']
  ] as const) {
    await chooseStageEvidence(chemist, lowLevelStudyCode, variantCode, {
      stageKey: 'extraction',
      experimentNumber,
      matrix,
      levelLabel: ''
    });
  }
  const choose = (part: ValidationPartKey, experiments: number[], reason: string): Promise<void> =>
    chooseValidationEvidence(chemist, lowLevelStudyCode, {
      part,
      variantCode,
      experiments,
      seen: '',
      reason
    });
  await choose('demonstration', [1], 'Made for it before anything else was done.');
  await choose('confirmation', [2, 3, 4], 'Spiked at the limit that is proposed, 10 ng/L.');
  await choose(
    'detection',
    [2, 3, 4],
    'Three batches on three days with their own blanks, as the procedure has it.'
  );

  const { replicates } = await getExperiment(chemist, lowLevelStudyCode, 5);
  const idOfLabel = (label: string): string => replicates.find((item) => item.label === label)?.id ?? '';
  await declareDuplicates(chemist, lowLevelStudyCode, {
    experimentNumber: 5,
    first: idOfLabel('X-S1'),
    second: idOfLabel('X-S2'),
    reason: 'Poured from one bottle and carried through side by side.'
  });
}
