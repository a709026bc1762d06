import { cellAddress } from './cell-address';
import type { ReadingLimits } from './limits';
import { damaged, outOfProportion } from './refusal';
import { kindNumber } from './sheet';
import type { Merge, Sheet } from './types';

/** Counts over all sheets of one file, and its texts, each kept once. */
export class TextStore {
  readonly texts: string[] = [];
  readonly #indexes = new Map<string, number>();
  readonly #limits: ReadingLimits;
  cells = 0;

  constructor(limits: ReadingLimits) {
    this.#limits = limits;
  }

  /** @throws Refusal when the text is out of proportion; how many there can be follows from the limit on cells */
  indexOf(text: string): number {
    const known = this.#indexes.get(text);
    if (known !== undefined) return known;
    if (text.length > this.#limits.textLength) {
      throw outOfProportion(`One cell of this file holds more than ${this.#limits.textLength} characters.`);
    }
    const index = this.texts.push(text) - 1;
    this.#indexes.set(text, index);
    return index;
  }
}

/** Collects the cells of one sheet into arrays that grow, in whatever order the file has them. */
export class SheetBuilder {
  readonly #store: TextStore;
  readonly #limits: ReadingLimits;
  #rows = new Uint32Array(1024);
  #columns = new Uint16Array(1024);
  #kinds = new Uint8Array(1024);
  #values = new Float64Array(1024);
  #count = 0;
  #isSorted = true;
  readonly merges: Merge[] = [];
  mergedColumns = 0;

  constructor(store: TextStore, limits: ReadingLimits) {
    this.#store = store;
    this.#limits = limits;
  }

  /** @throws Refusal past the limits */
  add(row: number, column: number, kind: keyof typeof kindNumber, value: number): void {
    if (row >= this.#limits.rows) {
      throw outOfProportion(
        `This sheet reaches down to row ${row + 1}; at most ${this.#limits.rows} rows are read.`
      );
    }
    if (column >= this.#limits.columns) {
      throw outOfProportion(`This sheet is wider than ${this.#limits.columns} columns.`);
    }
    if (++this.#store.cells > this.#limits.cells) {
      throw outOfProportion(`This file has more than ${this.#limits.cells} filled cells.`);
    }
    const last = this.#count - 1;
    if (last >= 0) {
      const lastRow = this.#rows[last] ?? 0;
      if (row < lastRow || (row === lastRow && column <= (this.#columns[last] ?? 0))) this.#isSorted = false;
    }
    if (this.#count === this.#rows.length) this.#grow();
    this.#rows[this.#count] = row;
    this.#columns[this.#count] = column;
    this.#kinds[this.#count] = kindNumber[kind];
    this.#values[this.#count] = value;
    this.#count++;
  }

  addText(row: number, column: number, kind: 'text' | 'error' | 'formula', text: string): void {
    this.add(row, column, kind, this.#store.indexOf(text));
  }

  #grow(): void {
    const size = Math.ceil(this.#rows.length * 1.6);
    this.#rows = enlarged(this.#rows, new Uint32Array(size));
    this.#columns = enlarged(this.#columns, new Uint16Array(size));
    this.#kinds = enlarged(this.#kinds, new Uint8Array(size));
    this.#values = enlarged(this.#values, new Float64Array(size));
  }

  /** @throws Refusal when one cell is there twice */
  finish(name: string, hidden: boolean): Sheet {
    if (!this.#isSorted) this.#sort(name);
    const rowNumbers: number[] = [];
    const rowStarts: number[] = [];
    let columnCount = 0;
    for (let index = 0; index < this.#count; index++) {
      const row = this.#rows[index] ?? 0;
      if (index === 0 || row !== this.#rows[index - 1]) {
        rowNumbers.push(row);
        rowStarts.push(index);
      }
      columnCount = Math.max(columnCount, (this.#columns[index] ?? 0) + 1);
    }
    rowStarts.push(this.#count);
    return {
      name,
      hidden,
      rowCount: (rowNumbers.at(-1) ?? -1) + 1,
      columnCount,
      rowNumbers: Uint32Array.from(rowNumbers),
      rowStarts: Uint32Array.from(rowStarts),
      columns: this.#columns.slice(0, this.#count),
      kinds: this.#kinds.slice(0, this.#count),
      values: this.#values.slice(0, this.#count),
      texts: this.#store.texts,
      merges: this.merges
    };
  }

  #sort(name: string): void {
    const rows = this.#rows;
    const columns = this.#columns;
    const order = Uint32Array.from({ length: this.#count }, (_, index) => index).sort(
      (one, other) => (rows[one] ?? 0) - (rows[other] ?? 0) || (columns[one] ?? 0) - (columns[other] ?? 0)
    );
    this.#rows = order.map((index) => rows[index] ?? 0);
    this.#columns = Uint16Array.from(order, (index) => columns[index] ?? 0);
    this.#kinds = Uint8Array.from(order, (index) => this.#kinds[index] ?? 0);
    this.#values = Float64Array.from(order, (index) => this.#values[index] ?? 0);
    for (let index = 1; index < this.#count; index++) {
      if (this.#rows[index] === this.#rows[index - 1] && this.#columns[index] === this.#columns[index - 1]) {
        const cell = cellAddress(this.#rows[index] ?? 0, this.#columns[index] ?? 0);
        throw damaged(`sheet ${name} gives cell ${cell} twice`);
      }
    }
  }
}

function enlarged<T extends Uint32Array | Uint16Array | Uint8Array | Float64Array>(from: T, to: T): T {
  to.set(from);
  return to;
}
