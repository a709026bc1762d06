import { describe, expect, it } from 'vitest';
import {
  columnDecimals,
  decimalRoom,
  decimalsOf,
  tableAsText,
  type TableColumn
} from '../../../src/lib/components/ui/table-column';

interface Row {
  readonly name: string;
  readonly recovery: string | null;
}
const columns: readonly TableColumn<Row>[] = [
  { key: 'name', label: 'Analyte', value: (row) => row.name },
  { key: 'recovery', label: 'Recovery', unit: '%', numeric: true, value: (row) => row.recovery }
];

it.each([
  ['12.25', 2],
  ['−4.3', 1],
  ['<0.5', 1],
  ['48,2', 1],
  ['48\u202F213', 0],
  ['104', 0],
  ['ND', 0],
  ['v1.25 b', 0]
])('counts the decimals of %s as %d', (text, decimals) => {
  expect(decimalsOf(text)).toBe(decimals);
});

describe('decimalRoom', () => {
  it.each([
    ['3.8', 2, '1ch'],
    ['104', 2, 'calc(2ch + 0.25em)'],
    ['12.25', 2, undefined],
    ['104', 0, undefined]
  ])('leaves %s in a column of %d decimals the room %s', (text, decimals, room) => {
    expect(decimalRoom(text, decimals)).toBe(room);
  });
});

it('takes the room of a column from its longest figure', () => {
  const rows = ['3.8', '12.25', null].map((recovery) => ({ name: 'x', recovery }));
  expect(columnDecimals(columns[1] as TableColumn<Row>, rows)).toBe(2);
});

it('copies with heads and units, a blank for what is missing, and no tab or line end inside a cell', () => {
  const rows = [
    { name: '2,4-D', recovery: '94.3' },
    { name: 'two\nlines\tand tab', recovery: null }
  ];
  expect(tableAsText(columns, rows)).toBe('Analyte\tRecovery (%)\n2,4-D\t94.3\ntwo lines and tab\t');
});
