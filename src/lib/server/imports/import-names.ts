import { parsePattern, splitLabel, usualPatterns } from '../../domain/sample-pattern';
import { NameMatcher } from './name-matcher';
import { PlaceFinder } from './place-finder';
import { readTemplateMark } from './template-mark';
import type { RecogniseContext } from './recognise-table';
import type { Expectation, Workbook } from './types';

/** The names that a file is matched with. */
export function namesOf(workbook: Workbook, expectation: Expectation): RecogniseContext {
  const places = new PlaceFinder(expectation, readTemplateMark(workbook)?.experimentId ?? null);
  const panelNames = new Map(expectation.panel.map(({ id, name }) => [id, name]));
  const known = new Map<string, boolean>();
  return {
    analytes: panelMatcher(expectation),
    places,
    nameOf: (id) => panelNames.get(id) ?? '',
    needsFraction: expectation.experiments.some(({ fractions }) => fractions.length > 1),
    isSample: (label) => {
      const before = known.get(label);
      if (before !== undefined) return before;
      const found = places.find(label, null).kind !== 'none' || followsUsualPattern(label, places);
      known.set(label, found);
      return found;
    }
  };
}

export function panelMatcher({ panel }: Expectation): NameMatcher<string> {
  const names = new NameMatcher<string>();
  for (const { id, name, synonyms, cas } of panel) names.add(id, [name, ...synonyms, ...(cas ? [cas] : [])]);
  return names;
}

const patterns = usualPatterns.map((pattern) => parsePattern(pattern) ?? []);

function followsUsualPattern(label: string, places: PlaceFinder): boolean {
  return patterns.some((tokens) =>
    splitLabel(label, tokens).some(({ sample, fraction }) => {
      if (sample === undefined) return false;
      const place = places.find(sample, null);
      if (place.kind === 'none' || place.kind === 'many') return false;
      if (fraction === undefined) return true;
      return place.kind === 'replicate' && places.fractions(place.experiment).match(fraction).kind === 'one';
    })
  );
}
