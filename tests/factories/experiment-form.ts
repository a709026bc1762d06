import { experimentForm, type ExperimentForm } from '../../src/lib/schemas/experiment';

/** A filled-in form for an extraction experiment: three spiked portions, one elution. */
export function makeExperimentForm(overrides: Readonly<Record<string, unknown>> = {}): ExperimentForm {
  return experimentForm.parse({
    stageKey: 'extraction',
    title: 'Spiked river water',
    medium: 'sample matrix',
    matrix: 'river water',
    levelLabel: '50 ng/L',
    subtract: 'none',
    sampleVolumeMl: '1 L',
    fractions: [{ name: 'Elution', kind: 'elution', countsAs: 'method' }],
    replicates: [{ kind: 'spiked', count: 3 }],
    spikes: [{ kind: 'spiked', targetsNg: '50' }],
    ...overrides
  });
}
