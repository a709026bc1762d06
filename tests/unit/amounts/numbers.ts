import type {
  CalibrationSet,
  ExperimentData,
  ExtractReported,
  Fraction,
  LevelReported,
  PanelEntry,
  Replicate
} from '../../../src/lib/server/amounts/types';

/** Small studies as plain numbers, overridable, for tests of the amounts module. */

let counter = 0;
const nextId = (): string => String((counter += 1));

export function entry(override: Partial<PanelEntry> & { readonly id: string }): PanelEntry {
  return { name: override.id, role: 'target', internalStandardId: null, ...override };
}

export function panelOf(...entries: readonly PanelEntry[]): ReadonlyMap<string, PanelEntry> {
  return new Map(entries.map((item) => [item.id, item]));
}

const reported = {
  importId: 'import-1',
  injectionId: 'injection-1',
  basis: 'area',
  state: 'value',
  value: null,
  internalArea: null,
  internalEntryId: null,
  limit: null,
  rawText: '',
  sheet: 1,
  row: 2,
  column: 5,
  injection: 1,
  dilution: 1
} as const;

export function levelArea(
  entryId: string,
  levelId: string,
  value: number,
  override: Partial<LevelReported> = {}
): LevelReported {
  return { ...reported, id: nextId(), entryId, levelId, value, rawText: String(value), ...override };
}

export function area(
  entryId: string,
  replicateId: string,
  fractionId: string | null,
  value: number | null,
  override: Partial<ExtractReported> = {}
): ExtractReported {
  return {
    ...reported,
    id: nextId(),
    entryId,
    replicateId,
    fractionId,
    value,
    rawText: value === null ? 'ND' : String(value),
    finalVolumeMl: 1,
    aliquotShare: 1,
    ...override
  };
}

/** Levels at 10, 20, 50 and 100 ng/mL of every entry named, with an area of 100 per ng/mL. */
export function straightLine(
  entryIds: readonly string[],
  override: Partial<CalibrationSet> = {}
): CalibrationSet {
  const concentrations = [10, 20, 50, 100];
  return {
    id: 'set-1',
    name: 'Calibration of 2 October',
    defaultModel: 'linear',
    defaultWeighting: 'none',
    levels: concentrations.map((concentration, index) => ({
      id: `level-${index + 1}`,
      number: index + 1,
      label: `L${index + 1}`,
      concentrations: new Map(entryIds.map((id) => [id, concentration]))
    })),
    choices: new Map(),
    reported: entryIds.flatMap((id) =>
      concentrations.map((concentration, index) => levelArea(id, `level-${index + 1}`, 100 * concentration))
    ),
    ...override
  };
}

export const elution: Fraction = {
  id: 'elution',
  name: 'First elution',
  kind: 'elution',
  countsAs: 'method',
  passedStages: []
};
export const aqueous: Fraction = {
  id: 'aqueous',
  name: 'Aqueous layer',
  kind: 'aqueous layer',
  countsAs: 'balance',
  passedStages: []
};

export function replicate(id: string, override: Partial<Replicate> = {}): Replicate {
  return {
    id,
    number: Number(id.replace(/\D/g, '')) || 1,
    label: id,
    kind: 'spiked',
    batch: null,
    sampleVolumeMl: 1000,
    sampleMassG: null,
    ...override
  };
}

export function experiment(override: Partial<ExperimentData> = {}): ExperimentData {
  return {
    id: 'experiment-1',
    number: 1,
    title: 'Extraction',
    stageKind: 'loss',
    subtract: 'none',
    calibrationSetId: 'set-1',
    fractions: [elution],
    replicates: [replicate('S1')],
    spikes: [],
    replicateSpikes: [],
    additions: [],
    exclusions: [],
    reported: [],
    ...override
  };
}
