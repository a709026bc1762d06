import type { ValidationPart, ValidationTable, ValidationView } from '$lib/views/validation';

/** A table as the page gets it: its first rows, which are the worst, and how many there are in all. */
export interface ShortTable extends ValidationTable {
  readonly total: number;
}

export interface ShortPart extends Omit<ValidationPart, 'tables'> {
  readonly tables: readonly ShortTable[];
}

export interface ShortView extends Omit<ValidationView, 'parts'> {
  readonly parts: readonly ShortPart[];
}

/** A panel up to this long is shown whole. */
const short = 16;
/** Of a longer one, this many rows come by themselves. */
const first = 12;

/** Cuts long tables to their worst rows, unless the part (or everything) is asked for whole. */
export function shortened(view: ValidationView, all: string | undefined): ShortView {
  return {
    ...view,
    parts: view.parts.map((part) => ({
      ...part,
      tables: part.tables.map((table) => ({
        ...table,
        total: table.rows.length,
        rows:
          all === 'everything' || all === part.key || table.rows.length <= short
            ? table.rows
            : table.rows.slice(0, first)
      }))
    }))
  };
}
