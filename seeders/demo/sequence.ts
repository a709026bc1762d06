import { simulateCalibration, simulateExperiment, simulateStandard } from './generator';
import type { SimulatedInjection } from './generator';
import type { PlannedExperiment } from './planned';
import { createRandom } from './random';
import type { ReportedInjection } from './workbooks';

/** What is run beside the levels and the extracts, as the sample column has it. */
export const checks = {
  secondSource: { label: 'ICV', concentrationNgPerMl: 100 },
  continuing: { label: 'CCV', concentrationNgPerMl: 50 },
  blank: { label: 'IB' }
} as const;

/** Extracts between two continuing checks. */
export const extractsInBracket = 10;
const minutesApart = 12;

/** The check that drifted: for two substances only, and in one run. */
export const drifted = { experiment: 'C', number: 3, signal: { Diuron: 1.31, Caffeine: 0.72 } } as const;

/**
 * The run of one experiment in order: the levels and the second source where they belong to it, a blank, then extracts with a continuing check
 * before them, after every tenth and at the end. Each injection has its time.
 */
export function runOf(experiment: PlannedExperiment, levelsInRun: boolean): readonly ReportedInjection[] {
  const { calibration, key } = experiment;
  let number = 0;
  const check = (): SimulatedInjection => {
    number += 1;
    const isDrifted = key === drifted.experiment && number === drifted.number;
    const signal: Readonly<Record<string, number>> = isDrifted ? drifted.signal : {};
    return simulateStandard(calibration, `check ${key} ${number}`, checks.continuing.label, ({ name }) => ({
      concentration: checks.continuing.concentrationNgPerMl,
      signal: signal[name] ?? 1
    }));
  };
  const secondSource = simulateStandard(
    calibration,
    `second source ${calibration}`,
    checks.secondSource.label,
    ({ name }) => ({
      concentration: checks.secondSource.concentrationNgPerMl,
      signal: createRandom(calibration, `lot ${name}`).factor(0.03)
    })
  );
  const blank = simulateStandard(calibration, `blank ${key}`, checks.blank.label, () => ({
    concentration: 0,
    signal: 1
  }));
  const vials = simulateExperiment(experiment);
  const run: SimulatedInjection[] = levelsInRun
    ? [...simulateCalibration(calibration), secondSource, blank, check()]
    : [blank, check()];
  vials.forEach((vial, index) => {
    run.push(vial);
    const isLast = index === vials.length - 1;
    if ((index + 1) % extractsInBracket === 0 || isLast) run.push(check());
  });
  const start = Date.parse(`${experiment.performedOn}T16:30:00Z`);
  return run.map((injection, index) => ({
    ...injection,
    acquiredAt: new Date(start + index * minutesApart * 60_000).toISOString().slice(0, 16).replace('T', ' ')
  }));
}
