import { percentText } from '$lib/domain/figure-text';
import { phFrom, phUpTo } from '$lib/domain/ph-text';
import type { ChargeView, PanelChemistryRow, PhRangeView } from '$lib/views/panel-chemistry';

/** Shares at which the groups part: what is rounded never crosses them. */
const limits = [1, 99];

/** A share of 0 to 1 in percent: "0.8", "99.2", "> 99.9"; all or nothing is said only of what is. */
export function neutralText(share: number): string {
  if (share === 0 || share === 1) return share === 0 ? '0' : '100';
  if (share < 0.0005) return '<\u20090.1';
  return share >= 0.9995 ? '>\u200999.9' : percentText(share * 100, limits);
}

/** A logarithm of a partition with one decimal, which is what pKa and log Kow carry at best. */
export function logDText(logD: number): string {
  const text = Math.abs(logD).toFixed(1);
  return `${logD < 0 && text !== '0.0' ? '\u2212' : ''}${text}`;
}

const marks: Readonly<Record<ChargeView, string>> = {
  none: '',
  positive: '(+)',
  negative: '(\u2212)',
  both: '(±)'
};

/** The sign of what most of an analyte carries, in brackets, so that it is not read as one of the figure; nothing for none. */
export const chargeMark = (charge: ChargeView | null): string => (charge === null ? '' : marks[charge]);

const chargeWords: Readonly<Record<ChargeView, string>> = {
  none: 'mostly neutral',
  positive: 'mostly positive',
  negative: 'mostly negative',
  both: 'mostly with both charges'
};
export const chargeWord = (charge: ChargeView): string => chargeWords[charge];

/** Ranges of the axis in words: "below 2.9", "5 to 7.4, above 11", with `unit` "below pH 2.9"; null for none. */
export function rangesText(ranges: readonly PhRangeView[], unit: '' | 'pH ' = ''): string | null {
  if (ranges.length === 0) return null;
  return ranges
    .map(({ low, high }) => {
      if (low <= 0 && high >= 14) return 'at any pH';
      // A range that leaves the axis at once has no tenth to be rounded to.
      if (high < 0.1 || low > 13.9) return high < 0.1 ? `about ${unit}0` : `about ${unit}14`;
      if (low <= 0) return `below ${unit}${phUpTo(high)}`;
      if (high >= 14) return `above ${unit}${phFrom(low)}`;
      const [first, last] = [phFrom(low), phUpTo(high)];
      return first > last ? `about ${unit}${((low + high) / 2).toFixed(2)}` : `${unit}${first} to ${last}`;
    })
    .join(', ');
}

/** A row as it is read aloud. */
export function neutralRowSentence(row: PanelChemistryRow, ph: number): string {
  if (row.neutral === null || row.charge === null) return `${row.name}: ${row.unknown ?? 'not known'}`;
  const parts = [
    `${neutralText(row.neutral)} % neutral at pH ${ph}, ${chargeWord(row.charge)}`,
    row.logD === null ? 'log D not known' : `log D ${logDText(row.logD)}`,
    `at least 99 % neutral ${rangesText(row.neutralRanges, 'pH ') ?? 'at no pH'}`,
    ...row.also
  ];
  return `${row.name}: ${parts.join('; ')}`;
}

/** "A, B and C" of variants. */
export function listedCodes(variants: readonly { readonly code: string }[]): string {
  const codes = variants.map(({ code }) => code);
  const last = codes.pop() ?? '';
  return codes.length === 0 ? last : `${codes.join(', ')} and ${last}`;
}
