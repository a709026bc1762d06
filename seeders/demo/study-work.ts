import type { Actor } from '../../src/lib/domain/actor';
import { createCalibrationSet } from '../../src/lib/server/services/calibrations';
import { createCheckStandard } from '../../src/lib/server/services/check-standards';
import { exclude } from '../../src/lib/server/services/exclusions';

import { createExperiment, getExperiment } from '../../src/lib/server/services/experiments';
import {
  chooseStageEvidence,
  createVariant,
  setProcedureSteps
} from '../../src/lib/server/services/variants';
import { spikeNg, surrogateNg } from './experiments';
import { calibrationNgPerMl, levelLabel, standardNg, standardNgPerMl } from './generator';
import { idOf, type PanelIds } from './panel-ids';
import { demoPanel, demoRecovered } from './panel';
import type { PlannedExperiment, PlannedPortion } from './planned';
import type { PlannedVariant } from './procedures';
import { checks, runOf } from './sequence';
import { upload } from './upload';
import { writeWorkbook } from './workbooks';

/** Who works on a study, by its code. */
export interface Bench {
  readonly studyCode: string;
  readonly chemist: Actor;
  readonly analyst: Actor;
}

const standards = demoPanel.filter(({ role }) => role === 'injection internal standard');
const title = 'Invented demo data';

export async function seedVariant({ studyCode, chemist }: Bench, variant: PlannedVariant): Promise<void> {
  const { code, name, description } = variant;
  await createVariant(chemist, studyCode, { code, name, description });
  await setProcedureSteps(chemist, studyCode, code, {
    version: 1,
    steps: variant.steps.map(({ stage, kind, instruction, parameters }) => ({
      stageKey: stage,
      kind,
      instruction,
      ph: parameters.ph ?? null,
      solvent: parameters.solvent ?? '',
      volumeMl: parameters.volumeMl ?? null,
      minutes: parameters.minutes ?? null,
      temperatureC: parameters.temperatureC ?? null
    }))
  });
}

/** A calibration set, its levels not measured yet. @returns its id */
export async function seedCalibration(
  { studyCode, chemist }: Bench,
  ids: PanelIds,
  calibration: 0 | 1
): Promise<string> {
  const setId = await createCalibrationSet(chemist, studyCode, {
    name: calibration === 0 ? 'First calibration' : 'Second calibration',
    instrument: 'Liquid and gas chromatograph, one table',
    calibratedOn: calibration === 0 ? '2026-10-05' : '2026-10-15',
    defaultModel: 'linear',
    defaultWeighting: '1/x',
    levels: calibrationNgPerMl.map((concentrationNgPerMl, level) => ({
      label: levelLabel(calibration, level),
      concentrationNgPerMl
    })),
    factors: {},
    constants: Object.fromEntries(standards.map(({ name }) => [idOf(ids, name), standardNgPerMl])),
    concentrations: {}
  });
  await seedChecks(chemist, studyCode, setId);
  return setId;
}

/** The second source, the continuing check and the blank of a set. The internal standards are in them as in the levels. */
async function seedChecks(chemist: Actor, studyCode: string, setId: string): Promise<void> {
  const { secondSource, continuing, blank } = checks;
  const described = [
    {
      ...secondSource,
      kind: 'second source',
      source: 'Invented maker B, lot 7701',
      note: 'Bought as a mixture, diluted once.'
    },
    { ...continuing, kind: 'continuing', source: 'As the levels', note: '' },
    {
      ...blank,
      kind: 'instrument blank',
      source: 'Solvent with the internal standards',
      note: '',
      concentrationNgPerMl: null
    }
  ] as const;
  for (const check of described) {
    await createCheckStandard(chemist, studyCode, setId, { ...check, concentrations: {} });
  }
}

/** Portions of one kind and batch, in the order planned. */
function groupsOf(portions: readonly PlannedPortion[]): readonly (readonly PlannedPortion[])[] {
  const groups = new Map<string, PlannedPortion[]>();
  for (const portion of portions) {
    const key = `${portion.kind} ${portion.batch ?? ''}`;
    groups.set(key, [...(groups.get(key) ?? []), portion]);
  }
  return [...groups.values()];
}

/** What each kind of portion receives: targets where it is spiked, surrogates unless it only shows the matrix effect. */
function spikesOf({ portions, stage }: PlannedExperiment) {
  const kinds = [...new Set(portions.map(({ kind }) => kind))];
  return kinds.map((kind) => {
    const showsMatrixEffect =
      stage === 'extraction' && (kind === 'post-extraction spike' || kind === 'solvent standard');
    return {
      kind,
      targetsNg: kind === 'unspiked' || kind === 'method blank' ? null : spikeNg,
      surrogatesNg: showsMatrixEffect ? null : surrogateNg,
      extractionStandardsNg: null,
      entries: {}
    };
  });
}

/** What an experiment is calibrated by, and whether the same run measured the levels too. */
export interface Calibrated {
  readonly setId: string;
  readonly levelsInRun: boolean;
}

/** One experiment: planned, measured, brought in, and its mishap set aside. */
export async function seedExperiment(
  bench: Bench,
  ids: PanelIds,
  calibration: Calibrated,
  experiment: PlannedExperiment
): Promise<void> {
  const { studyCode, chemist, analyst } = bench;
  const number = await createExperiment(chemist, studyCode, {
    stageKey: experiment.stage,
    title: experiment.title,
    medium: experiment.medium,
    matrix: experiment.matrix ?? '',
    levelLabel: `${spikeNg} ng`,
    subtract: experiment.subtract,
    performedOn: experiment.performedOn,
    analystId: analyst.userId,
    calibrationSetId: calibration.setId,
    sampleVolumeMl: experiment.sampleVolumeMl,
    finalVolumeMl: null,
    spikes: spikesOf(experiment),
    additions: standards.map(({ name }) => ({
      panelEntryId: idOf(ids, name),
      point: experiment.standardsIn,
      amountNg: experiment.standardsIn === 'extract' ? standardNg : null,
      concentrationNgPerMl: experiment.standardsIn === 'vial' ? standardNgPerMl : null
    })),
    fractions: experiment.fractions.map(({ name, kind, countsAs, passedStages }) => ({
      id: null,
      name,
      kind,
      countsAs,
      passedStages: [...passedStages]
    })),
    replicates: groupsOf(experiment.portions).map((group) => ({
      kind: group[0]?.kind ?? 'spiked',
      count: group.length,
      batch: group[0]?.batch ?? '',
      sampleVolumeMl: experiment.sampleVolumeMl,
      labels: group.map(({ label }) => label).join('\n')
    })),
    variantCode: ''
  });
  for (const code of experiment.serves) {
    await chooseStageEvidence(chemist, studyCode, code, {
      stageKey: experiment.stage,
      experimentNumber: number,
      matrix: '',
      levelLabel: ''
    });
  }
  const vials = runOf(experiment, calibration.levelsInRun);
  await upload(analyst, studyCode, {
    fileName: `run-${experiment.performedOn}-${experiment.key.toLowerCase()}.xlsx`,
    bytes: await writeWorkbook(title, experiment.layout, vials, demoRecovered),
    experimentNumber: number
  });
  await setMishapsAside(bench, number, experiment);
}

async function setMishapsAside(bench: Bench, number: number, experiment: PlannedExperiment): Promise<void> {
  const mishaps = experiment.portions.filter(({ mishap }) => mishap !== null);
  if (mishaps.length === 0) return;
  const { replicates } = await getExperiment(bench.analyst, bench.studyCode, number);
  for (const { label, mishap } of mishaps) {
    const replicate = replicates.find((candidate) => candidate.label === label);
    if (!replicate || !mishap) throw new Error(`experiment ${number} has no ${label}`);
    await exclude(bench.analyst, bench.studyCode, number, {
      replicateId: replicate.id,
      fractionId: null,
      analyteId: null,
      cause: mishap.cause
    });
  }
}
