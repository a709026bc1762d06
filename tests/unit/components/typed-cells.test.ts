import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { columnWindows } from '../../../src/routes/(app)/studies/[study]/experiments/[experiment]/type/column-windows';
import { changedCells, filledCells, laidOver, type TypedCells } from '../../../src/lib/domain/typed-cells';
import type { TypingColumn } from '../../../src/lib/views/typing';

const keys = fc.constantFrom('a', 'b', 'c');
const cells: fc.Arbitrary<TypedCells> = fc.dictionary(
  keys,
  fc.dictionary(keys, fc.string({ minLength: 1, maxLength: 3 }))
);

const filled = (grid: TypedCells): string[] =>
  Object.entries(grid)
    .flatMap(([row, own]) =>
      Object.entries(own).flatMap(([column, text]) => (text === '' ? [] : [`${row} ${column} ${text}`]))
    )
    .sort();

describe('cells that are sent', () => {
  it('laid over what was there, give what is there now', () => {
    fc.assert(
      fc.property(cells, cells, (before, after) => {
        expect(filled(laidOver(before, changedCells(before, after)))).toEqual(filled(after));
      })
    );
  });

  it('are none where nothing changed', () => {
    fc.assert(
      fc.property(cells, (grid) => {
        expect(changedCells(grid, { ...grid })).toEqual({});
      })
    );
  });

  it('that were taken back leave neither an empty cell nor an empty row', () => {
    expect(
      filledCells(laidOver({ a: { b: '1' }, c: { b: '2', d: '3' } }, { a: { b: '' }, c: { d: '' } }))
    ).toEqual({
      c: { b: '2' }
    });
  });

  it('leave the grids they come from as they are', () => {
    const before = Object.freeze({ a: Object.freeze({ b: '1' }) });
    expect(laidOver(before, { a: { c: '2' } })).toEqual({ a: { b: '1', c: '2' } });
    expect(before).toEqual({ a: { b: '1' } });
  });
});

describe('parts of a wide grid', () => {
  const column = (index: number, kind: TypingColumn['kind']): TypingColumn => ({
    key: `c${index}`,
    label: `Column ${index}`,
    unit: null,
    kind
  });
  const columnsOf = (preparation: number, values: number): TypingColumn[] => [
    ...Array.from({ length: preparation }, (_, index) => column(index, 'preparation')),
    ...Array.from({ length: values }, (_, index) => column(preparation + index, 'value'))
  ];

  it('show every value column once, in order, and no preparation column', () => {
    fc.assert(
      fc.property(
        fc.nat(200),
        fc.integer({ min: 0, max: 4 }),
        fc.integer({ min: 1, max: 200 }),
        (rows, preparation, values) => {
          const parts = columnWindows(rows, columnsOf(preparation, values));
          const shown = parts.flatMap(({ from, to }) =>
            Array.from({ length: to - from }, (_, index) => from + index)
          );
          expect(shown).toEqual(Array.from({ length: values }, (_, index) => preparation + index));
        }
      )
    );
  });

  it('are one where the grid is small', () => {
    expect(columnWindows(12, columnsOf(3, 20))).toEqual([
      { from: 3, to: 23, label: 'Column 3 to Column 22' }
    ]);
  });

  it('are none without a value column', () => {
    expect(columnWindows(12, columnsOf(3, 0))).toEqual([]);
  });
});
