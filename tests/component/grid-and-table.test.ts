import { describe, expect, it, vi } from 'vitest';
import { userEvent } from 'vitest/browser';
import { render } from 'vitest-browser-svelte';
import DataGrid from '../../src/lib/components/ui/DataGrid.svelte';
import Table from '../../src/lib/components/ui/Table.svelte';
import type { TableColumn } from '../../src/lib/components/ui/table-column';
import { expectNoViolations } from './axe';

const grid = {
  caption: 'Areas',
  rows: [
    { key: 'S1', label: 'S1' },
    { key: 'S2', label: 'S2', hint: 'batch 2' }
  ],
  columns: [
    { key: 'area', label: 'NDMA', unit: 'area', numeric: true },
    { key: 'internal', label: 'NDMA-d6', unit: 'area', numeric: true }
  ],
  values: { S1: { area: '48213', internal: '101877' } }
};

function pasteText(target: Element, text: string): void {
  const clipboardData = new DataTransfer();
  clipboardData.setData('text/plain', text);
  target.dispatchEvent(new ClipboardEvent('paste', { clipboardData, bubbles: true, cancelable: true }));
}

describe('DataGrid', () => {
  it('is plain named inputs underneath, so that it sends without JavaScript', async () => {
    const screen = await render(DataGrid, grid);
    const input = screen.getByRole('textbox', { name: 'S1, NDMA', exact: true });
    await expect.element(input).toHaveValue('48213');
    await expect.element(input).toHaveAttribute('name', 'cell[S1][area]');
    await expectNoViolations();
  });

  it('moves with arrows, Enter and Tab, and Enter does not send the form', async () => {
    const screen = await render(DataGrid, grid);
    const at = (name: string) => screen.getByRole('textbox', { name, exact: true });
    await at('S1, NDMA').click();
    await userEvent.keyboard('{Enter}');
    await expect.element(at('S2, NDMA')).toHaveFocus();
    await userEvent.keyboard('{ArrowRight}');
    await expect.element(at('S2, NDMA-d6')).toHaveFocus();
    await userEvent.keyboard('{ArrowUp}');
    await expect.element(at('S1, NDMA-d6')).toHaveFocus();
    await userEvent.keyboard('{Tab}');
    await expect.element(at('S2, NDMA')).toHaveFocus();
  });

  it('takes many cells from a spreadsheet, says what had no place, and undoes it', async () => {
    const onchange = vi.fn();
    const screen = await render(DataGrid, { ...grid, onchange });
    const first = screen.getByRole('textbox', { name: 'S1, NDMA-d6', exact: true });
    pasteText(first.element(), '99 120\t7\n"48,2"\t\nND\t');
    await expect.element(first).toHaveValue('99 120');
    await expect
      .element(screen.getByRole('textbox', { name: 'S2, NDMA-d6', exact: true }))
      .toHaveValue('48,2');
    await expect.element(screen.getByRole('status')).toHaveTextContent('2 cells pasted. 2 more had no place');
    expect(onchange).toHaveBeenLastCalledWith({
      S1: { area: '48213', internal: '99 120' },
      S2: { internal: '48,2' }
    });
    await screen.getByRole('button', { name: 'Undo the paste' }).click();
    await expect.element(first).toHaveValue('101877');
  });

  it('leaves the paste of a single cell to the browser', async () => {
    const screen = await render(DataGrid, grid);
    const input = screen.getByRole('textbox', { name: 'S1, NDMA', exact: true });
    pasteText(input.element(), '5');
    await expect.element(input).toHaveValue('48213');
    await expect.element(screen.getByRole('status')).toHaveTextContent('');
  });

  it('names a problem at its cell and again below, with what was typed still there', async () => {
    const screen = await render(DataGrid, {
      ...grid,
      values: { S2: { area: '48,2l3' } },
      errors: { 'S2:area': "holds '48,2l3' where an area was expected. Is the l a 1?" }
    });
    const cell = screen.getByRole('textbox', { name: 'S2, NDMA', exact: true });
    await expect.element(cell).toHaveValue('48,2l3');
    await expect.element(cell).toBeInvalid();
    await expect
      .element(cell)
      .toHaveAccessibleDescription(/S2, NDMA holds '48,2l3' where an area was expected/);
    await expectNoViolations();
  });
});

interface Row {
  readonly id: string;
  readonly first: string | null;
}
const rows: readonly Row[] = [
  { id: 'S1', first: '3.8' },
  { id: 'S2', first: '104' },
  { id: 'S3', first: null }
];
const columns: readonly TableColumn<Row>[] = [
  { key: 'id', label: 'Replicate', heads: true, value: (row) => row.id },
  {
    key: 'first',
    label: 'First elution',
    unit: '%',
    numeric: true,
    value: (row) => row.first,
    href: (row) => `?figure=${row.id}`,
    sort: { href: '?sort=first', state: 'descending' }
  }
];
const table = { rows, columns, rowKey: (row: Row) => row.id, caption: 'Replicates' };

describe('Table', () => {
  it('stands figures under each other on the decimal point', async () => {
    const screen = await render(Table<Row>, table);
    const point = (figure: string): number => {
      const node = screen.getByText(figure, { exact: true }).element().firstChild as Text;
      const range = document.createRange();
      range.setStart(node, 0);
      range.setEnd(node, figure.includes('.') ? figure.indexOf('.') : figure.length);
      return range.getBoundingClientRect().right;
    };
    expect(Math.abs(point('3.8') - point('104'))).toBeLessThan(1);
  });

  it('heads rows and columns, marks the order, the lit row and what is missing', async () => {
    const screen = await render(Table<Row>, { ...table, highlighted: 'S2' });
    await expect.element(screen.getByRole('table', { name: 'Replicates' })).toBeVisible();
    await expect.element(screen.getByRole('rowheader', { name: 'S2' })).toBeVisible();
    await expect
      .element(screen.getByRole('columnheader', { name: /First elution/ }))
      .toHaveAttribute('aria-sort', 'descending');
    expect(screen.container.querySelector('tr[aria-current]')?.textContent).toContain('S2');
    await expect.element(screen.getByRole('row', { name: /S3/ })).toHaveTextContent('—');
    await expect.element(screen.getByRole('link', { name: '104' })).toHaveAttribute('href', '?figure=S2');
    await expectNoViolations();
  });

  it('copies with heads and says so', async () => {
    const write = vi.spyOn(navigator.clipboard, 'writeText').mockResolvedValue();
    const screen = await render(Table<Row>, table);
    await screen.getByRole('button', { name: /Copy table/ }).click();
    await expect.element(screen.getByRole('status')).toHaveTextContent('copied');
    expect(write).toHaveBeenCalledWith('Replicate\tFirst elution (%)\nS1\t3.8\nS2\t104\nS3\t');
    write.mockRestore();
  });

  it('says when the browser refuses to copy', async () => {
    const write = vi.spyOn(navigator.clipboard, 'writeText').mockRejectedValue(new Error('denied'));
    const screen = await render(Table<Row>, table);
    await screen.getByRole('button', { name: /Copy table/ }).click();
    await expect.element(screen.getByRole('status')).toHaveTextContent('the browser refused');
    write.mockRestore();
  });
});
