/** The parts of a sample name that a pattern can name in braces; {any} is skipped. */
export const sampleParts = ['sample', 'fraction', 'injection', 'dilution', 'any'] as const;
export type SamplePart = (typeof sampleParts)[number];

export type PatternToken =
  { readonly kind: 'part'; readonly part: SamplePart } | { readonly kind: 'text'; readonly text: string };

/** What a label says, part by part; a part that the pattern does not have, or the label lacks, is not there. */
export type SplitLabel = Readonly<Partial<Record<SamplePart, string>>>;

/** Parts that a label may lack although the pattern has them: the first injection is often not numbered. */
const optionalParts = ['fraction', 'injection', 'dilution'] as const satisfies readonly SamplePart[];

/** Longer labels are not taken apart: the number of ways grows with their length. */
const longestLabel = 200;

/**
 * What is wrong with a pattern such as "{sample}_{fraction}_{injection}": parts in braces, each once but {any}, parted by text that
 * is compared as it stands.
 *
 * @returns a sentence, or null for a pattern that can be followed
 */
export function patternFault(text: string): string | null {
  const parts = [...text.matchAll(/\{([^{}]*)\}/g)].map(([, part = '']) => part);
  const unknown = parts.find((part) => !(sampleParts as readonly string[]).includes(part));
  if (unknown !== undefined)
    return `{${unknown}} is no part of a sample name. Use {${sampleParts.join('}, {')}}.`;
  if (/[{}]/.test(text.replace(/\{[^{}]*\}/g, ''))) return 'A brace is opened or closed without its fellow.';
  if (!parts.includes('sample')) return 'The pattern needs {sample}, the part that names the sample.';
  if (text.includes('}{')) return 'Two parts need something between them, such as _ or a space.';
  const twice = parts.find((part, index) => part !== 'any' && parts.indexOf(part) !== index);
  return twice === undefined ? null : `{${twice}} stands in the pattern twice.`;
}

/** @returns null for a text that is no pattern */
export function parsePattern(text: string): readonly PatternToken[] | null {
  if (patternFault(text) !== null) return null;
  return text
    .trim()
    .split(/(\{[^{}]*\})/)
    .filter((piece) => piece !== '')
    .map((piece): PatternToken =>
      piece.startsWith('{')
        ? { kind: 'part', part: piece.slice(1, -1) as SamplePart }
        : { kind: 'text', text: piece }
    );
}

/**
 * All patterns that a label may follow when parts of it may be lacking, in groups: those that lack least come first. A
 * part takes the text before it along, or, at the start, the text behind it.
 */
export function withPartsLacking(
  tokens: readonly PatternToken[]
): readonly (readonly (readonly PatternToken[])[])[] {
  const present = optionalParts.filter((part) => tokens.some((token) => isPart(token, part)));
  const groups: (readonly PatternToken[])[][] = Array.from({ length: present.length + 1 }, () => []);
  for (let subset = 0; subset < 2 ** present.length; subset++) {
    const lacking = present.filter((_, index) => (subset >> index) & 1);
    groups[lacking.length]?.push(lacking.reduce((left, part) => without(left, part), tokens));
  }
  return groups;
}

function isPart(token: PatternToken, part: SamplePart): boolean {
  return token.kind === 'part' && token.part === part;
}

function without(tokens: readonly PatternToken[], part: SamplePart): readonly PatternToken[] {
  const at = tokens.findIndex((token) => isPart(token, part));
  if (at < 0) return tokens;
  const neighbour = at > 0 ? at - 1 : 1;
  const dropsNeighbour = tokens[neighbour]?.kind === 'text';
  return tokens.filter((_, index) => index !== at && !(dropsNeighbour && index === neighbour));
}

/** Every way in which a label follows the pattern; letter case of the text between the parts does not matter. */
export function splitLabel(label: string, tokens: readonly PatternToken[]): readonly SplitLabel[] {
  const text = label.trim();
  if (text.length > longestLabel) return [];
  const lower = text.toLowerCase();
  if (tokens.some((token) => token.kind === 'text' && !lower.includes(token.text.toLowerCase()))) return [];
  const found: SplitLabel[] = [];

  function follow(at: number, token: number, split: SplitLabel): void {
    const current = tokens[token];
    if (!current) {
      if (at === text.length) found.push(split);
      return;
    }
    if (current.kind === 'text') {
      const wanted = current.text.toLowerCase();
      if (lower.startsWith(wanted, at)) follow(at + wanted.length, token + 1, split);
      return;
    }
    const next = tokens[token + 1];
    if (!next || next.kind === 'part') {
      take(text.slice(at), text.length, current.part, token, split);
      return;
    }
    const mark = next.text.toLowerCase();
    for (let end = lower.indexOf(mark, at + 1); end >= 0; end = lower.indexOf(mark, end + 1)) {
      take(text.slice(at, end), end, current.part, token, split);
    }
  }

  function take(piece: string, end: number, part: SamplePart, token: number, split: SplitLabel): void {
    const trimmed = piece.trim();
    if (trimmed === '' || !canBe(part, trimmed)) return;
    follow(end, token + 1, part === 'any' ? split : { ...split, [part]: trimmed });
  }

  follow(0, 0, {});
  return found;
}

function canBe(part: SamplePart, text: string): boolean {
  if (part === 'injection') return injectionIn(text) !== null;
  if (part === 'dilution') return dilutionIn(text) !== null;
  return true;
}

/** "2", "02" */
export function injectionIn(text: string): number | null {
  const number = /^\d{1,6}$/.test(text) ? Number(text) : 0;
  return number >= 1 && number <= 32_767 ? number : null;
}

/** "10", "2,5" */
export function dilutionIn(text: string): number | null {
  const factor = /^\d{1,7}(?:[.,]\d{1,4})?$/.test(text) ? Number(text.replace(',', '.')) : 0;
  return factor >= 1 ? factor : null;
}

const separators = ['_', ' - ', '-', ', ', ' / ', '/', ' | ', '|', ' ', '.'] as const;
const injections = [
  '{injection}',
  'inj{injection}',
  'inj {injection}',
  '#{injection}',
  'i{injection}'
] as const;
/** A bare number at the end is an injection: taken for a dilution without saying so, it would multiply the result. */
const dilutions = ['x{dilution}', '{dilution}x', '1:{dilution}', 'DF{dilution}'] as const;

/** Patterns in use, the plainest first, to be tried where none was given. */
export const usualPatterns: readonly string[] = [
  ['{sample}', '{fraction}'],
  ['{fraction}', '{sample}'],
  ...injections.flatMap((injection) => [
    ['{sample}', '{fraction}', injection],
    ['{sample}', injection],
    ['{fraction}', '{sample}', injection]
  ]),
  ...dilutions.flatMap((dilution) => [
    ['{sample}', '{fraction}', dilution],
    ['{sample}', dilution],
    ...injections.flatMap((injection) => [
      ['{sample}', '{fraction}', dilution, injection],
      ['{sample}', dilution, injection]
    ])
  ])
].flatMap((pieces) => separators.map((separator) => pieces.join(separator)));
