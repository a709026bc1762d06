import type { CalibrationModelName, CalibrationWeighting } from '../../domain/vocabulary';
import type { CalibrationSet, FitChoice } from './types';

/** How somebody would fit one analyte. */
export interface ProposedFit {
  readonly model: CalibrationModelName;
  readonly weighting: CalibrationWeighting;
  readonly levelsLeftOut: readonly string[];
}

/** Every kind of line with every weighting that makes sense. An average response factor has its weighting built in. */
export const fitKinds: readonly Pick<ProposedFit, 'model' | 'weighting'>[] = [
  { model: 'average response factor', weighting: 'none' },
  ...(['linear', 'quadratic'] as const).flatMap((model) =>
    (['none', '1/x', '1/x2'] as const).map((weighting) => ({ model, weighting }))
  )
];

/** True where two choices draw the same line. */
export function isSameFit(a: ProposedFit, b: ProposedFit): boolean {
  const left = [...a.levelsLeftOut].sort().join(' ');
  return (
    a.model === b.model &&
    (a.model === 'average response factor' || a.weighting === b.weighting) &&
    left === [...b.levelsLeftOut].sort().join(' ')
  );
}

/** The set as it would be with the given choices, by panel entry; what was reported stays as it is. */
export function withChoices<Set extends CalibrationSet>(
  set: Set,
  proposed: ReadonlyMap<string, ProposedFit>
): Set {
  const choices = new Map<string, FitChoice>(set.choices);
  for (const [entryId, fit] of proposed) {
    const before = set.choices.get(entryId);
    choices.set(entryId, { fitId: null, revision: (before?.revision ?? 0) + 1, ...fit });
  }
  return { ...set, choices };
}
