import { nameKey } from '../../domain/name-key';
import { headerWords, sampleWords, vialWords } from './header-words';
import type { HeaderWord } from './header-words';
import type { NameMatcher } from './name-matcher';
import { isAmount, isConcentration, isMarkedUnit, isUnit } from './units';

/** What a value column holds, as far as its header says. */
export type StatedKind = 'area' | 'vial' | 'ng_per_l' | 'ng' | 'concentration' | 'result';

export type Header =
  | {
      readonly meaning: 'value';
      readonly kind: StatedKind;
      readonly unit: string | null;
      readonly analyte: string | null;
    }
  | {
      readonly meaning: 'internal area' | BesideWord;
      readonly unit: string | null;
      readonly analyte: string | null;
    }
  | {
      readonly meaning: Exclude<HeaderWord, 'area' | 'result' | 'internalArea' | BesideWord>;
      readonly unit: string | null;
    }
  | { readonly meaning: 'unknown'; readonly unit: string | null };

const wordByKey = new Map<string, HeaderWord>(
  (Object.keys(headerWords) as HeaderWord[]).flatMap((word) =>
    headerWords[word].map((text): [string, HeaderWord] => [nameKey(text) || text, word])
  )
);

/** What a column can hold beside the value of one analyte. */
export const besideWords = [
  'limit',
  'retentionTime',
  'ionRatio',
  'signalToNoise',
  'manualIntegration',
  'manualCause'
] as const satisfies readonly HeaderWord[];
export type BesideWord = (typeof besideWords)[number];

const isBesideWord = (word: HeaderWord): word is BesideWord =>
  (besideWords as readonly HeaderWord[]).includes(word);

/** What may follow or precede an analyte's name in a header. Shortest first: the longest name that is on the panel is the one meant. */
const qualifiers = [...wordByKey]
  .filter(([, word]) => word === 'area' || word === 'internalArea' || word === 'result' || isBesideWord(word))
  .sort(([one], [other]) => one.length - other.length);

/** Letters so few that a name can end in them by chance: they count only where something parts them from the name. */
const shortQualifier = 3;

/**
 * Reads one header: its unit (in brackets, or at its end after a comma or a space), then a word of `headerWords`, or an
 * analyte, or an analyte with such a word ("Caffeine area", "Caffeine (ng/L)").
 *
 * @param analytes the panel's names
 */
export function readHeader(text: string, analytes: NameMatcher<string>): Header {
  const { words, unit } = splitUnit(text);
  const whole = wordOf(words);
  if (words.trim() === '' && unit !== null)
    return { meaning: 'value', kind: kindOf(text, unit), unit, analyte: null };
  // "IS area" is the area of the analyte IS where the panel has one.
  if (whole) return qualified(text, words, unit, analytes) ?? headerOf(whole, text, unit, null);

  // The whole text first: a name may end like a unit.
  const full = analyteOf(text, analytes);
  if (full !== null) return { meaning: 'value', kind: 'result', unit: null, analyte: full };
  const named = analyteOf(words, analytes);
  if (named !== null)
    return { meaning: 'value', kind: kindOf(withoutName(text, words), unit), unit, analyte: named };
  const withWord = qualified(text, words, unit, analytes);
  if (withWord) return withWord;
  const beforeWords = vialOrSample(words);
  if (beforeWords) {
    const analyte = analyteOf(beforeWords.rest, analytes);
    if (analyte !== null) return { meaning: 'value', kind: kindOf(text, unit), unit, analyte };
    const word = wordOf(beforeWords.rest);
    if (word) return headerOf(word, text, unit, null);
  }
  // What is in brackets may be anything once it is no analyte: "Area (counts)".
  const bare = wordOf(words.replace(/[([{][^)\]}]*[)\]}]/g, ' '));
  return bare ? headerOf(bare, text, unit, null) : { meaning: 'unknown', unit };
}

/** An analyte's name with a word behind or before it. */
function qualified(
  text: string,
  words: string,
  unit: string | null,
  analytes: NameMatcher<string>
): Header | null {
  const key = nameKey(words.replace(/[,;:|/]\s*$/, ''));
  for (const [qualifier, word] of qualifiers) {
    const rest = key.endsWith(qualifier)
      ? key.slice(0, -qualifier.length)
      : key.startsWith(qualifier)
        ? key.slice(qualifier.length)
        : '';
    if (rest === '' || (qualifier.length <= shortQualifier && !standsAlone(words, qualifier))) continue;
    const analyte = analyteOf(rest.replace(/^[,:;\-.]+|[,:;\-.]+$/g, ''), analytes);
    if (analyte !== null) return headerOf(word, text, unit, analyte);
  }
  return null;
}

/** What a header means by its words alone, whatever the panel has; null: they are none of ours. */
export function wordHeader(text: string): Header | null {
  const { words, unit } = splitUnit(text);
  const word = wordOf(words);
  return word ? headerOf(word, text, unit, null) : null;
}

function headerOf(word: HeaderWord, text: string, unit: string | null, analyte: string | null): Header {
  if (word === 'area') return { meaning: 'value', kind: 'area', unit: null, analyte };
  if (word === 'internalArea') return { meaning: 'internal area', unit: null, analyte };
  if (isBesideWord(word)) return { meaning: word, unit, analyte };
  if (word === 'result') return { meaning: 'value', kind: kindOf(text, unit), unit, analyte };
  return { meaning: word, unit };
}

function standsAlone(words: string, qualifier: string): boolean {
  const parts = words.split(/[\s_,;:()[\]{}|-]+/u).filter((part) => part !== '');
  return [parts[0], parts.at(-1)].some((part) => part !== undefined && nameKey(part) === qualifier);
}

/** A concentration says by a word whether it is that of the vial or of the sample; many do not. */
function kindOf(text: string, unit: string | null): StatedKind {
  if (unit === null) return 'result';
  if (isAmount(unit)) return 'ng';
  if (!isConcentration(unit)) return 'result';
  const key = nameKey(text);
  if (vialWords.some((word) => key.includes(nameKey(word)))) return 'vial';
  if (sampleWords.some((word) => key.includes(nameKey(word)))) return 'ng_per_l';
  return 'concentration';
}

/** The rest of a header must not lend its words from an analyte's name ("Water blue (ng/mL)"). */
function withoutName(text: string, words: string): string {
  return text.replace(words, ' ');
}

/** "Caffeine in the vial": the part before the words that say of what a concentration is. */
function vialOrSample(words: string): { readonly rest: string } | null {
  const match =
    /^(.*?)[\s,(]+(?:in|of)\s+(?:the\s+)?(?:[a-z]+\s+)?(?:vial|extract|sample|water|solution)\W*$/i.exec(
      words
    );
  return match ? { rest: match[1] ?? '' } : null;
}

function wordOf(text: string): HeaderWord | null {
  const trimmed = text.trim();
  return wordByKey.get(nameKey(trimmed) || trimmed) ?? null;
}

function analyteOf(text: string, analytes: NameMatcher<string>): string | null {
  if (text.trim() === '') return null;
  const match = analytes.match(text);
  return match.kind === 'one' ? match.value : null;
}

/** @returns the unit that a text is, alone or in brackets ("mL", "[ng/mL]"); null where it is anything else */
export function bareUnit(text: string): string | null {
  const bare = text.trim().replace(/^[([]\s*|\s*[)\]]$/g, '');
  return isUnit(bare) || (bare !== text.trim() && isMarkedUnit(bare)) ? bare : null;
}

function splitUnit(text: string): { readonly words: string; readonly unit: string | null } {
  const trimmed = text.trim();
  if (isUnit(trimmed)) return { words: '', unit: trimmed };
  const bracketed = /^(.*)[([]\s*(?:in\s+)?([^()[\]]+?)\s*[)\]]([^()[\]]*)$/su.exec(trimmed);
  if (bracketed && (isUnit(bracketed[2] ?? '') || isMarkedUnit(bracketed[2] ?? ''))) {
    return { words: `${bracketed[1]} ${bracketed[3]}`.trim(), unit: bracketed[2] ?? null };
  }
  // "ng/mL in the vial": the unit first.
  const leading = /^(\S+)\s+(in|of)\s+(.+)$/su.exec(trimmed);
  if (leading && isUnit(leading[1] ?? '')) return { words: '', unit: leading[1] ?? null };
  const trailing = /^(.*?)(?:\s*[,;:]\s*|\s+in\s+|\s+)(\S+)$/su.exec(trimmed);
  if (trailing && isUnit(trailing[2] ?? ''))
    return { words: (trailing[1] ?? '').trim(), unit: trailing[2] ?? null };
  return { words: trimmed, unit: null };
}

/** A unit that stands in brackets but is none of ours, to be named in a problem. */
export function statedUnit(text: string): string | null {
  return /[([]\s*([^()[\]]+?)\s*[)\]]\s*$/u.exec(text.trim())?.[1] ?? null;
}
