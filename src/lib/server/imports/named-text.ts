import type { CarriedName } from '../../schemas/column-map';
import type { NameMatcher } from './name-matcher';
import type { PlaceFinder } from './place-finder';
import { readHeader } from './read-header';

/** A name that a sheet, a title or a block carries for all its rows. */
export interface NamedText {
  readonly text: string;
  /** Where it stands; null: it is the sheet's name. */
  readonly row: number | null;
  readonly column: number | null;
}

export interface Names {
  readonly analytes: NameMatcher<string>;
  readonly places: PlaceFinder;
  /** Whether a label means a place, perhaps with the help of a pattern. */
  readonly isSample: (label: string) => boolean;
}

const prefix: Readonly<Record<CarriedName, RegExp>> = {
  sample: /^(?:sample|label|replicate|portion|preparation|level|sample (?:name|id|label))\s*[:=\u2013-]\s*/i,
  fraction: /^(?:fraction|fraction name)\s*[:=\u2013-]\s*/i,
  analyte: /^(?:analyte|compound|substance|component|peak|parameter)(?: name)?\s*[:=\u2013-]\s*/i
};

/** What stands in a title beside the name: "Caffeine areas", "Results of S1". */
const around =
  /^(?:results?|areas?|peak areas?|data|amounts?)\s+(?:of|for)\s+|[\s,_-]+(?:results?|areas?|peak areas?|data|amounts?)$/gi;

/**
 * The texts that a title can mean by itself, the likeliest first: what follows its label ("Analyte: Caffeine"), the
 * whole, the whole without "areas of" and the like, and its parts.
 */
function readingsOf(text: string, names: CarriedName): readonly string[] {
  const whole = text.trim();
  const labelled = whole.replace(prefix[names], '').trim();
  const bare = labelled.replace(around, '').trim();
  const parts = whole
    .split(/\s*[,;|\t\n/]\s*|_|\s+[-–—]\s+/)
    .map((part) => part.replace(prefix[names], '').replace(around, '').trim());
  return [...new Set([labelled, whole, bare, ...parts])].filter((each) => each !== '' && each.length <= 300);
}

/** @returns the part of a title that names what is looked for, or null */
export function nameIn(text: string, what: CarriedName, names: Names): string | null {
  const readings = readingsOf(text, what);
  switch (what) {
    case 'fraction':
      return readings.find((reading) => names.places.hasFraction(reading)) ?? null;
    case 'sample':
      return (
        readings.find((reading) => names.places.find(reading, null).kind !== 'none') ??
        readings.find(names.isSample) ??
        null
      );
    case 'analyte':
      return (
        readings.find((reading) => names.analytes.match(reading).kind !== 'none') ??
        readings.find((reading) => {
          const header = readHeader(reading, names.analytes);
          return header.meaning === 'value' && header.analyte !== null;
        }) ??
        null
      );
  }
}

/** Of several titles the first that names it; else the first that has its label, or the first of all, to be reported. */
export function namedText(titles: readonly NamedText[], what: CarriedName, names: Names): NamedText | null {
  for (const title of titles) {
    const text = nameIn(title.text, what, names);
    if (text !== null) return { ...title, text };
  }
  const unknown = titles.find(({ text }) => prefix[what].test(text.trim())) ?? titles[0];
  return unknown ? { ...unknown, text: readingsOf(unknown.text, what)[0] ?? unknown.text.trim() } : null;
}
