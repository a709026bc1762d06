import { figureText, percentText } from '../../../../domain/figure-text';
import type { ProvenanceInput, ProvenanceView, SourceCell } from '../../../../views/provenance';
import type { FitChoice, Reported } from '../../../amounts/types';
import { cellAddress } from '../../../imports/cell-address';
import { halfWidth } from '../figure-parts';
import type { StudyFigures } from '../study-figures';

/** What every level of a provenance starts from. */
export const blankLevel = {
  figure: null,
  missing: null,
  verdict: null,
  formula: null,
  reading: '',
  sentences: [],
  inputs: [],
  tables: [],
  cells: [],
  setAside: [],
  up: null
} as const satisfies Partial<ProvenanceView>;

/** The cell a number came from, with the way to it in the stored file. */
export function sourceCell(figures: StudyFigures, reported: Reported): SourceCell {
  const file = figures.data.imports.find((item) => item.id === reported.importId);
  const fromRow = Math.max(1, reported.row - 5);
  return {
    fileName: file?.fileName ?? 'a file that is no longer listed',
    sheet: file?.sheetNames[reported.sheet - 1] ?? `sheet ${reported.sheet}`,
    cell: cellAddress(reported.row - 1, reported.column - 1),
    rawText: reported.rawText,
    sha256: file?.sha256 ?? '',
    href: `/studies/${figures.data.code}/data/${reported.importId}?sheet=${reported.sheet - 1}&fromRow=${fromRow}`
  };
}

/** "straight line, weighted 1/x, revision 2" */
export function choiceText(choice: FitChoice): string {
  const model = {
    'average response factor': 'average response factor',
    linear: 'straight line',
    quadratic: 'curve of second order'
  }[choice.model];
  const weighting =
    choice.model === 'average response factor' || choice.weighting === 'none'
      ? ''
      : `, weighted ${choice.weighting}`;
  return `${model}${weighting}${choice.revision === null ? ", the set's default" : `, revision ${choice.revision}`}`;
}

interface FigureOf {
  readonly mean: number;
  readonly n: number;
  readonly ci: { readonly lower: number; readonly upper: number; readonly level: number } | null;
}

/** A mean in percent with its half-width, as the drawer heads it. */
export function percentFigure(
  of: FigureOf,
  total: number,
  limits: readonly number[] = []
): NonNullable<ProvenanceView['figure']> {
  const half = halfWidth(of.ci);
  return {
    value: percentText(of.mean, limits),
    unit: '%',
    halfWidth: half === null ? null : percentText(half),
    level: of.ci ? Math.round(of.ci.level * 100) : null,
    n: of.n === total ? String(of.n) : `${of.n} of ${total}`
  };
}

/** An input of a figure: opened, so with all the digits that were given, or six of what was computed. */
export function input(
  label: string,
  value: number | string | null,
  unit: string,
  more: { readonly note?: string | null; readonly href?: string | null } = {}
): ProvenanceInput {
  const text = value === null ? '—' : typeof value === 'string' ? value : digitsOf(value);
  return { label, value: text, unit, note: more.note ?? null, href: more.href ?? null };
}

/** Whole numbers (areas) as they are, the rest to six significant digits without idle zeros. */
function digitsOf(value: number): string {
  if (Number.isInteger(value) && Math.abs(value) < 1e15) {
    return figureText(value, Math.max(1, String(Math.abs(value)).length));
  }
  const text = figureText(value, 6);
  return text.includes('e') ? text : text.replace(/(\.\d*?)0+$/, '$1').replace(/\.$/, '');
}
