import type { Carried, ColumnMap } from '../../schemas/column-map';
import type { FileMapView, LabelView, PlaceGroup, TableMapView } from '../../views/imports';
import { cellAddress, columnLetters } from '../imports/cell-address';
import type { Expectation } from '../imports/types';
import type { Declared } from './import-expectation';
import type { FileRead } from './import-reading';

/** How much of a long list one page shows. */
const shown = { labels: 300, texts: 40 } as const;

const needsLook: ReadonlySet<LabelView['how']> = new Set(['not found', 'ambiguous']);

/** What lies over one sheet: which lines mean what. */
export function tableMapView(map: ColumnMap, sheet: string): TableMapView | null {
  const table = map.tables.find(({ sheets }) => sheets.includes(sheet));
  if (!table) return null;
  const isTurned = table.orientation === 'analytes down';
  const carriedFrom = (names: Carried['names']): string | null => {
    const carried = table.carried.find((each) => each.names === names);
    if (!carried) return null;
    return carried.from === 'title cell' ? cellAddress(carried.row, carried.column) : carried.from;
  };
  return {
    orientation: table.orientation,
    headerLines: table.headerLines.map((line) => line + 1),
    blocks: table.blocks,
    carried: {
      sample: carriedFrom('sample'),
      fraction: carriedFrom('fraction'),
      analyte: carriedFrom('analyte')
    },
    alike: table.sheets.filter((name) => name !== sheet),
    lines: table.columns.map(({ column, header, means, analyte, basis, unit }) => ({
      line: column,
      name: isTurned ? String(column + 1) : columnLetters(column),
      header,
      means,
      analyte,
      basis,
      unit
    }))
  };
}

/** How a file is read as a whole, with everything that a person may change about it. */
export function fileMapView({ mapped, expectation, keptMap }: FileRead, declared: Declared): FileMapView {
  const { map, labels, valueMeanings } = mapped;
  const sorted: readonly LabelView[] = [
    ...labels.filter(({ how }) => needsLook.has(how)),
    ...labels.filter(({ how }) => !needsLook.has(how))
  ];
  return {
    source: declared.map ? 'changed' : keptMap ? 'kept' : 'recognised',
    kept: keptMap && { name: keptMap.name, version: keptMap.version },
    samplePattern: map.samplePattern,
    isPatternConfirmed: map.isPatternConfirmed,
    matching: map.matching,
    fixed: map.fixed,
    labels: sorted.slice(0, shown.labels),
    labelCount: labels.length,
    places: placeGroups(expectation),
    analytes: expectation.panel.map(({ name }) => name),
    texts: valueMeanings.slice(0, shown.texts),
    mends: declared.mends
  };
}

function placeGroups({ experiments, calibrationSets }: Expectation): readonly PlaceGroup[] {
  return [
    ...experiments.map(({ title, replicates, fractions }) => ({
      title,
      places: replicates.map(({ id, label }) => ({ value: `replicate ${id}`, label })),
      fractions
    })),
    ...calibrationSets.map(({ name, levels, checks }) => ({
      title: name,
      places: [
        ...levels.map((level) => ({ value: `level ${level.id}`, label: level.name })),
        ...checks.map((check) => ({ value: `check ${check.id}`, label: check.name }))
      ],
      fractions: []
    }))
  ].filter(({ places }) => places.length > 0);
}
