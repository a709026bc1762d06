import type {
  Expectation,
  ExperimentExpectation,
  PanelExpectation,
  ReplicateExpectation
} from '../../src/lib/server/imports/types';

export function replicateExpectation(
  label: string,
  over: Partial<ReplicateExpectation> = {}
): ReplicateExpectation {
  return {
    id: `replicate ${label}`,
    label,
    kind: 'spiked',
    takesFraction: true,
    finalVolumeMl: null,
    ...over
  };
}

export function experimentExpectation(over: Partial<ExperimentExpectation> = {}): ExperimentExpectation {
  return {
    id: 'experiment 1',
    title: 'Extraction at pH 7',
    calibrationSetId: 'calibration 1',
    replicates: ['S1', 'S2'].map((label) => replicateExpectation(label)),
    fractions: ['Elution 1', 'Aqueous layer'].map((name) => ({ id: `fraction ${name}`, name })),
    ...over
  };
}

export function panelExpectation(name: string, over: Partial<PanelExpectation> = {}): PanelExpectation {
  return {
    id: `entry ${name}`,
    name,
    synonyms: [],
    cas: null,
    role: 'target',
    internalStandard: null,
    hasLowestLevel: true,
    ...over
  };
}

/** Two analytes, externally calibrated, in one experiment of two replicates with two fractions, and a calibration of two levels. */
export function expectation(over: Partial<Expectation> = {}): Expectation {
  return {
    experiments: [experimentExpectation()],
    panel: [
      panelExpectation('Caffeine', { cas: '58-08-2', synonyms: ['1,3,7-trimethylxanthine'] }),
      panelExpectation('α-Testol')
    ],
    calibrationSets: [
      {
        id: 'calibration 1',
        name: 'Week 9',
        instrument: 'Instrument 1',
        levels: [
          { id: 'level 1', name: 'Level 1' },
          { id: 'level 2', name: 'Level 2' }
        ],
        checks: []
      }
    ],
    experimentId: null,
    declared: { basis: null, decimal: null },
    ...over
  };
}
