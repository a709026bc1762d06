import type { DecimalMark } from './types';

/** How a text reads as a number: certain, open between two numbers, or not at all. */
export type NumberText =
  | { readonly kind: 'number'; readonly value: number; readonly evidence: DecimalMark | null }
  | { readonly kind: 'ambiguous'; readonly asPoint: number; readonly asComma: number }
  | { readonly kind: 'none' };

const spaces = /[\s\u00a0\u2000-\u200a\u202f\u205f\u3000]/g;
const none: NumberText = { kind: 'none' };

/**
 * Reads a text as a number. Thousands may be marked by spaces of any width, apostrophes, points or commas, in groups of three.
 *
 * - Both point and comma: the last one parts the decimals. "1.234,5" is 1234.5.
 * - One of them twice or more: it marks thousands. "1,234,567" is 1234567.
 * - One of them once, with exactly three digits after and one to three before that do not start with 0: it could mark either.
 *   "1,234" is 1.234 or 1234: ambiguous unless `decimal` is known.
 * - One of them once, otherwise: it parts the decimals. "48,2" and "0,125" are certain.
 *
 * @param decimal what is known about the column; null: nothing. A text that contradicts it is no number
 * @returns the number; `evidence` is the decimal mark it proves, null where it proves none (12, 1 234)
 */
export function parseNumber(text: string, decimal: DecimalMark | null = null): NumberText {
  const match = /^([+-]?)([\d.,'’ ]*\d[\d.,'’ ]*)(e[+-]?\d{1,3})?$/i.exec(
    text
      .trim()
      .replace(spaces, ' ')
      .replace(/[\u2212\u2013]/g, '-')
  );
  if (!match) return none;
  const [, sign = '', grouped = '', exponent = ''] = match;
  const mantissa = withoutGroupMarks(grouped);
  if (mantissa === null) return none;
  const points = mantissa.split('.').length - 1;
  const commas = mantissa.split(',').length - 1;

  function number(plain: string, evidence: DecimalMark | null): NumberText {
    if (decimal && evidence && evidence !== decimal) return none;
    const value = Number(sign + plain + exponent);
    return Number.isFinite(value) ? { kind: 'number', value, evidence } : none;
  }

  if (points + commas === 0) return number(mantissa, null);
  if (points > 0 && commas > 0) return bothMarks(mantissa, number);
  const mark = points > 0 ? '.' : ',';
  const asDecimal = mark === '.' ? 'point' : 'comma';
  const asThousands = mark === '.' ? 'comma' : 'point';
  if (points + commas > 1)
    return isGrouped(mantissa, mark) ? number(mantissa.replaceAll(mark, ''), asThousands) : none;

  const decimals = mantissa.replace(mark, '.');
  const isOpen =
    isGrouped(mantissa, mark) && !mantissa.startsWith('0') && exponent === '' && mantissa === grouped;
  if (!isOpen) return number(decimals, asDecimal);
  const fraction = Number(sign + decimals);
  const thousands = Number(sign + mantissa.replace(mark, ''));
  if (decimal) return { kind: 'number', value: decimal === asDecimal ? fraction : thousands, evidence: null };
  return mark === '.'
    ? { kind: 'ambiguous', asPoint: fraction, asComma: thousands }
    : { kind: 'ambiguous', asPoint: thousands, asComma: fraction };
}

/** Takes spaces and apostrophes out where they part groups of three; null where they stand anywhere else. */
function withoutGroupMarks(text: string): string | null {
  const mark = /[ '’]/.exec(text)?.[0];
  if (!mark) return text;
  const [whole = ''] = text.split(/[.,](?=[^.,]*$)/);
  return isGrouped(whole, mark) && !/[ '’]/.test(text.slice(whole.length)) ? text.replaceAll(mark, '') : null;
}

function bothMarks(
  mantissa: string,
  number: (plain: string, evidence: DecimalMark) => NumberText
): NumberText {
  const comma = mantissa.lastIndexOf(',') > mantissa.lastIndexOf('.');
  const [decimalMark, groupMark] = comma ? [',', '.'] : ['.', ','];
  const [whole = '', decimals = '', ...more] = mantissa.split(decimalMark);
  if (more.length > 0 || !isGrouped(whole, groupMark) || !/^\d*$/.test(decimals)) return none;
  return number(`${whole.replaceAll(groupMark, '')}.${decimals}`, comma ? 'comma' : 'point');
}

function isGrouped(text: string, mark: string): boolean {
  const [first = '', ...groups] = text.split(mark);
  return /^\d{1,3}$/.test(first) && groups.length > 0 && groups.every((group) => /^\d{3}$/.test(group));
}

/**
 * What a text would read as when the usual slips are undone: l or I for 1, O for 0, a doubled mark.
 *
 * @returns the text mended and what was taken for what, or null where that makes no number either
 */
export function mendNumber(text: string): { readonly text: string; readonly slip: string } | null {
  const slips: [RegExp, string, string][] = [
    [/[lI|]/g, '1', 'a letter that looks like a 1'],
    [/[oO]/g, '0', 'an O that stands for a 0'],
    [/([.,])\1+/g, '$1', 'a mark typed twice'],
    [/\s+(?=[.,])|(?<=[.,])\s+/g, '', 'a space beside the decimal mark'],
    [/["'`´]/g, '', 'a quotation mark']
  ];
  let mended = text.trim();
  const made: string[] = [];
  for (const [pattern, replacement, slip] of slips) {
    const next = mended.replace(pattern, replacement);
    if (next !== mended) made.push(slip);
    mended = next;
  }
  if (made.length === 0 || !/\d/.test(text) || parseNumber(mended).kind === 'none') return null;
  return { text: mended, slip: made.join(' and ') };
}
