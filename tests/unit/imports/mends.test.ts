import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { cellAddress } from '../../../src/lib/server/imports/cell-address';
import { readingLimits } from '../../../src/lib/server/imports/limits';
import { originalText, withMends } from '../../../src/lib/server/imports/mends';
import { readWorkbook } from '../../../src/lib/server/imports/read-workbook';
import { cellAt } from '../../../src/lib/server/imports/sheet';
import type { Workbook } from '../../../src/lib/server/imports/types';

const read = (text: string): Promise<Workbook> => readWorkbook(Buffer.from(text, 'utf8'), readingLimits);
const table = 'Sample,Area\nS1,12\nS2,"48,2l3"\nS3,14\n';

const rawAt = (workbook: Workbook, row: number, column: number): string | null => {
  const [sheet] = workbook.sheets;
  return sheet ? (cellAt(sheet, row, column)?.raw ?? null) : null;
};
const mend = (cell: string, text: string) => ({ sheet: '', cell, text, original: '' });

async function mended(...mends: readonly ReturnType<typeof mend>[]): Promise<Workbook> {
  const workbook = await read(table);
  const sheet = workbook.sheets[0]?.name ?? '';
  return withMends(
    workbook,
    mends.map((each) => ({ ...each, sheet }))
  );
}

describe('a mended cell', () => {
  it('is read in place of what stands there, and every other cell as it is', async () => {
    const workbook = await mended(mend('B3', '48,213'));
    expect(rawAt(workbook, 2, 1)).toBe('48,213');
    expect(rawAt(workbook, 1, 1)).toBe('12');
    expect(rawAt(workbook, 3, 0)).toBe('S3');
  });

  it('is a number where a plain number is typed', async () => {
    const workbook = await mended(mend('B3', ' 48.213 '));
    const [sheet] = workbook.sheets;
    expect(sheet && cellAt(sheet, 2, 1)).toMatchObject({ kind: 'number', value: 48.213 });
  });

  it('can be one that was empty, beyond the table too, and one that is to count as blank', async () => {
    const workbook = await mended(mend('D6', 'ND'), mend('B2', ''));
    expect(rawAt(workbook, 5, 3)).toBe('ND');
    expect(rawAt(workbook, 1, 1)).toBeNull();
    expect(workbook.sheets[0]).toMatchObject({ rowCount: 6, columnCount: 4 });
  });

  it('leaves the workbook that was read as it was, and tells what stood there', async () => {
    const workbook = await read(table);
    const sheet = workbook.sheets[0]?.name ?? '';
    withMends(workbook, [{ ...mend('B3', '1'), sheet }]);
    expect(originalText(workbook, sheet, 'B3')).toBe('48,2l3');
    expect(originalText(workbook, sheet, 'Z99')).toBe('');
  });

  it('is refused at a place that is none', async () => {
    const workbook = await read(table);
    expect(() => withMends(workbook, [mend('B3', '1')])).toThrow(/no cell B3 in a sheet/);
    await expect(mended(mend('hello', '1'))).rejects.toThrow(RangeError);
  });

  it('holds for any set of cells', async () => {
    const workbook = await read(table);
    const sheet = workbook.sheets[0]?.name ?? '';
    fc.assert(
      fc.property(
        fc.uniqueArray(
          fc.record({ row: fc.nat(8), column: fc.nat(5), text: fc.constantFrom('', '7', 'ND', 'x') }),
          {
            selector: ({ row, column }) => `${row} ${column}`
          }
        ),
        (cells) => {
          const after = withMends(
            workbook,
            cells.map(({ row, column, text }) => ({
              sheet,
              cell: cellAddress(row, column),
              text,
              original: ''
            }))
          );
          for (let row = 0; row < 10; row++) {
            for (let column = 0; column < 7; column++) {
              const own = cells.find((cell) => cell.row === row && cell.column === column);
              expect(rawAt(after, row, column)).toBe(own ? own.text || null : rawAt(workbook, row, column));
            }
          }
        }
      )
    );
  });
});
