import { describe, expect, it } from 'vitest';
import { nextCell, parsePaste, pasteInto, type CellPlace } from '../../../src/lib/components/ui/grid-cells';

const shape = {
  rows: ['S1', 'S2'],
  columns: [{ key: 'area' }, { key: 'fixed', readonly: true }, { key: 'internal' }]
};

describe('parsePaste', () => {
  it.each([
    [
      '1\t2\n3\t4',
      [
        ['1', '2'],
        ['3', '4']
      ]
    ],
    [
      '1\t2\r\n3\t4\r\n',
      [
        ['1', '2'],
        ['3', '4']
      ]
    ],
    ['1\r2', [['1'], ['2']]],
    ['1\t\t3', [['1', '', '3']]],
    ['"a\tb"\t"line\nbreak"', [['a\tb', 'line\nbreak']]],
    ['"say ""so"""\t5', [['say "so"', '5']]],
    ['5" pipe\t2', [['5" pipe', '2']]],
    ['"5 pipe\t2', [['"5 pipe', '2']]],
    ['48,2\tND\t<0.5', [['48,2', 'ND', '<0.5']]],
    ['', [['']]],
    ['1\n\n2', [['1'], [''], ['2']]]
  ])('reads %j as %j', (text, cells) => {
    expect(parsePaste(text)).toEqual(cells);
  });
});

describe('pasteInto', () => {
  const values = Object.freeze({ S1: Object.freeze({ area: '1', fixed: 'x' }) });

  it('fills from the cell on, right and down, and leaves the given values alone', () => {
    const result = pasteInto(values, shape, { row: 0, column: 0 }, [['10'], ['20']]);
    expect(result).toEqual({
      values: { S1: { area: '10', fixed: 'x' }, S2: { area: '20' } },
      filled: 2,
      dropped: 0
    });
    expect(values.S1.area).toBe('1');
  });

  it('counts what had no place: past the edges, and on a column that is not typed', () => {
    const result = pasteInto(values, shape, { row: 1, column: 0 }, [
      ['10', 'y', '30', '40'],
      ['50', '', '']
    ]);
    expect(result.values).toEqual({ S1: { area: '1', fixed: 'x' }, S2: { area: '10', internal: '30' } });
    expect(result).toMatchObject({ filled: 2, dropped: 3 });
  });
});

describe('nextCell', () => {
  const middle = { shift: false, atStart: false, atEnd: false };
  it.each<[string, Partial<typeof middle>, CellPlace, CellPlace | null]>([
    ['ArrowDown', {}, { row: 0, column: 0 }, { row: 1, column: 0 }],
    ['ArrowDown', {}, { row: 1, column: 0 }, null],
    ['ArrowUp', {}, { row: 1, column: 2 }, { row: 0, column: 2 }],
    ['Enter', {}, { row: 0, column: 2 }, { row: 1, column: 2 }],
    ['Enter', { shift: true }, { row: 1, column: 2 }, { row: 0, column: 2 }],
    ['ArrowRight', { atEnd: true }, { row: 0, column: 0 }, { row: 0, column: 2 }],
    ['ArrowRight', {}, { row: 0, column: 0 }, null],
    ['ArrowRight', { atEnd: true }, { row: 0, column: 2 }, null],
    ['ArrowLeft', { atStart: true }, { row: 0, column: 2 }, { row: 0, column: 0 }],
    ['Tab', {}, { row: 0, column: 2 }, { row: 1, column: 0 }],
    ['Tab', {}, { row: 1, column: 2 }, null],
    ['Tab', { shift: true }, { row: 1, column: 0 }, { row: 0, column: 2 }],
    ['a', {}, { row: 0, column: 0 }, null]
  ])('%s %j from %j leads to %j', (key, edge, from, to) => {
    expect(nextCell({ key, ...middle, ...edge }, from, shape)).toEqual(to);
  });
});
