import type { Problems } from './problems';
import type { Assignment, Expectation } from './types';

/**
 * Gives the places of the planned run to the labels of a file, one after the other: those of `runOrder`, else the replicates and
 * fractions of the experiment in their order. Labels that a person assigned take no part.
 *
 * @param labels in the order of the file, each once
 * @returns place by label; where there are more or fewer labels than places it is an error, and no label gets one
 */
export function runOrderOf(
  labels: readonly string[],
  assignments: ReadonlyMap<string, Assignment>,
  expectation: Expectation,
  problems: Problems
): ReadonlyMap<string, Assignment> {
  const open = labels.filter((label) => !assignments.has(label));
  const places = expectation.runOrder ?? placesOf(expectation);
  if (open.length === places.length && places.length > 0) {
    return new Map(
      open.flatMap((label, index) => {
        const place = places[index];
        return place ? [[label, place] as const] : [];
      })
    );
  }
  problems.error({
    code: 'run order differs',
    sheet: null,
    found: `${open.length} ${open.length === 1 ? 'label' : 'labels'}`,
    expected: places.length === 0 ? 'an experiment whose run is known' : `${places.length} places of the run`,
    what:
      places.length === 0
        ? 'Labels cannot be matched by run order, since no experiment with replicates was chosen.'
        : `The file has ${open.length} labels, and the run has ${places.length} places: they cannot be matched one after the other.`,
    fix: 'Say which labels are to be left out, match the labels by their names, or bring the file from the page of its experiment.'
  });
  return new Map();
}

function placesOf({ experiments, experimentId }: Expectation): readonly Assignment[] {
  const experiment = experiments.find(({ id }) => id === experimentId);
  if (!experiment) return [];
  return experiment.replicates.flatMap(({ id, takesFraction }): readonly Assignment[] => {
    const place = { kind: 'replicate', experimentId: experiment.id, replicateId: id } as const;
    return takesFraction
      ? experiment.fractions.map((fraction) => ({ ...place, fractionId: fraction.id }))
      : [{ ...place, fractionId: null }];
  });
}
