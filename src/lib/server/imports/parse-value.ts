import { mendNumber, parseNumber } from './parse-number';
import type { Cell, DecimalMark } from './types';

/**
 * What a cell says about a measurement.
 *
 * | in the cell | meaning |
 * | --- | --- |
 * | a number, also as text with decimal comma or thousands marks | that value |
 * | ND, n.d., not detected, none detected, <LOD | not detected, limit not stated |
 * | <0.5 | below 0.5: not detected, with 0.5 as its limit |
 * | <LOQ, below LOQ | below a limit that is not stated |
 * | >500, >max, above range | above the calibrated range: unusable until diluted and injected again |
 * | nothing, -, n/a, not measured | missing: no measurement was made. Never not detected |
 * | #DIV/0!, #N/A | a failed formula: an error, since nobody can tell what it should have been |
 * | a number formatted as a date | open: the number underneath is shown and asked about |
 * | 1,234 | open until the column, the file or the person says which mark parts the decimals |
 * | anything else | no value: an error |
 */
export type ParsedValue =
  | { readonly state: 'value'; readonly value: number }
  | { readonly state: 'not detected' }
  | { readonly state: 'below'; readonly limit: number | null }
  | { readonly state: 'above'; readonly limit: number | null }
  | { readonly state: 'missing' }
  | { readonly state: 'date'; readonly serial: number; readonly iso: string }
  | { readonly state: 'ambiguous'; readonly asPoint: number; readonly asComma: number }
  | { readonly state: 'error'; readonly error: string }
  | { readonly state: 'formula' }
  | { readonly state: 'slip'; readonly mended: string; readonly slip: string }
  | { readonly state: 'unit'; readonly number: string; readonly unit: string }
  | { readonly state: 'contradicts' }
  | { readonly state: 'unreadable' };

/** Compared without spaces, points and letter case. */
const notDetected = new Set([
  'nd',
  'notdetected',
  'nonedetected',
  'notfound',
  '<lod',
  '<mdl',
  '<dl',
  'bdl',
  'belowlod'
]);
const belowUnstated = new Set(['<loq', '<ql', '<mql', 'belowloq', 'blq', '<min', '<limit']);
const aboveUnstated = new Set([
  '>max',
  '>uloq',
  'aboverange',
  'overrange',
  'abovecalibration',
  '>range',
  '>cal'
]);
const missing = new Set([
  '',
  '-',
  '--',
  '---',
  'n/a',
  'na',
  'notmeasured',
  'notanalysed',
  'notanalyzed',
  'missing',
  'none'
]);

/** @param decimal the decimal mark of the column where it is known */
export function parseValue(cell: Cell | null, decimal: DecimalMark | null): ParsedValue {
  if (!cell) return { state: 'missing' };
  switch (cell.kind) {
    case 'number':
      return { state: 'value', value: cell.value };
    case 'date':
      return { state: 'date', serial: cell.value, iso: cell.raw };
    case 'error':
      return { state: 'error', error: cell.value };
    case 'formula':
      return { state: 'formula' };
    case 'boolean':
      return { state: 'unreadable' };
    case 'text':
      return parseText(cell.value, decimal);
  }
}

function parseText(text: string, decimal: DecimalMark | null): ParsedValue {
  const word = text
    .toLowerCase()
    .replace(/[\u2010-\u2015\u2212]/g, '-')
    .replace(/[\s\u00a0\u200b\ufeff.]/g, '');
  if (missing.has(word)) return { state: 'missing' };
  if (notDetected.has(word)) return { state: 'not detected' };
  if (belowUnstated.has(word)) return { state: 'below', limit: null };
  if (aboveUnstated.has(word)) return { state: 'above', limit: null };
  if (/^#(?:n\/a|div\/0!|value!|ref!|name\?|num!|null!)$/i.test(text.trim()))
    return { state: 'error', error: text.trim() };

  const limit = /^\s*([<>≤≥])\s*=?(.*)$/su.exec(text);
  if (limit)
    return parseLimit(limit[1] === '<' || limit[1] === '≤' ? 'below' : 'above', limit[2] ?? '', decimal);
  const number = parseNumber(text, decimal);
  if (number.kind === 'number') return { state: 'value', value: number.value };
  if (number.kind === 'ambiguous')
    return { state: 'ambiguous', asPoint: number.asPoint, asComma: number.asComma };
  return explain(text, decimal);
}

function parseLimit(state: 'below' | 'above', text: string, decimal: DecimalMark | null): ParsedValue {
  const number = parseNumber(text, decimal);
  if (number.kind === 'ambiguous')
    return { state: 'ambiguous', asPoint: number.asPoint, asComma: number.asComma };
  if (number.kind === 'number')
    return number.value > 0 ? { state, limit: number.value } : { state: 'unreadable' };
  return explain(text, decimal);
}

function explain(text: string, decimal: DecimalMark | null): ParsedValue {
  if (decimal && parseNumber(text).kind !== 'none') return { state: 'contradicts' };
  const mended = mendNumber(text);
  if (mended) return { state: 'slip', mended: mended.text, slip: mended.slip };
  const withUnit = /^\s*([\d.,\s\u00a0]*\d)\s*([a-zµμ%][a-zµμ/%·\d\s-]*)$/iu.exec(text);
  if (withUnit && parseNumber(withUnit[1] ?? '').kind !== 'none') {
    return { state: 'unit', number: (withUnit[1] ?? '').trim(), unit: (withUnit[2] ?? '').trim() };
  }
  return { state: 'unreadable' };
}
