import type { ReportedBasis } from '../../domain/vocabulary';
import type { TypedCells } from '../../domain/typed-cells';
import type { TypingColumn, TypingRow } from '../../views/typing';
import type { Experiment } from '../db/models/experiment';
import type { Expectation } from '../imports/types';

/** A row for every injection of every extract of an experiment, then of the levels and checks of its calibration. */
export function gridRows(
  expectation: Expectation,
  experiment: Pick<Experiment, 'id' | 'calibrationSetId'>,
  injections: number
): TypingRow[] {
  const own = expectation.experiments.find(({ id }) => id === experiment.id);
  const numbers = Array.from({ length: injections }, (_, index) => index + 1);
  const row = (id: string, sample: string, fraction: { id: string; name: string } | null, isLevel = false) =>
    numbers.map((injection): TypingRow => ({
      key: `${id}_${fraction?.id ?? ''}_${injection}`,
      sample,
      fraction: fraction?.name ?? null,
      injection,
      isLevel
    }));
  const portions = (own?.replicates ?? []).flatMap(({ id, label, takesFraction }) =>
    takesFraction
      ? (own?.fractions ?? []).flatMap((fraction) => row(id, label, fraction))
      : row(id, label, null)
  );
  const set = expectation.calibrationSets.find(({ id }) => id === experiment.calibrationSetId);
  const standards = [...(set?.levels ?? []), ...(set?.checks ?? [])];
  return [...portions, ...standards.flatMap(({ id, name }) => row(id, name, null, true))];
}

/** What is typed of an injection: how it was prepared, and a value for each analyte. */
export function gridColumns(expectation: Expectation, basis: ReportedBasis): TypingColumn[] {
  const preparation = (key: string, label: string, unit: string | null = null): TypingColumn => ({
    key,
    label,
    unit,
    kind: 'preparation'
  });
  const vial =
    basis === 'area' || basis === 'vial'
      ? [
          preparation('final-volume', 'Final volume', 'mL'),
          preparation('dilution', 'Dilution'),
          preparation('share', 'Aliquot share')
        ]
      : [];
  const entries = expectation.panel.flatMap(({ id, name, role }): TypingColumn[] => {
    const isStandard = role === 'injection internal standard';
    if (isStandard && basis !== 'area') return [];
    const unit = basis === 'area' ? null : basis === 'ng' ? 'ng' : basis === 'vial' ? 'ng/mL' : 'ng/L';
    return [{ key: id, label: name, unit, kind: isStandard ? 'internal standard' : 'value' }];
  });
  return [...vial, ...entries];
}

/** Cells that have a place in the grid now, and how many have none. */
export function placed(
  cells: TypedCells,
  rows: readonly TypingRow[],
  columns: readonly TypingColumn[]
): { readonly cells: TypedCells; readonly without: number } {
  const columnKeys = new Set(columns.map(({ key }) => key));
  const rowKeys = new Set(rows.map(({ key }) => key));
  const kept: Record<string, Record<string, string>> = {};
  let without = 0;
  for (const [row, own] of Object.entries(cells)) {
    for (const [column, text] of Object.entries(own)) {
      if (rowKeys.has(row) && columnKeys.has(column)) (kept[row] ??= {})[column] = text;
      else without += 1;
    }
  }
  return { cells: kept, without };
}
