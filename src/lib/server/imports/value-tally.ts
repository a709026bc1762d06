import type { Cell, ValueMeaning } from './types';
import type { ReadNumber } from './read-cell';

type Meaning = ValueMeaning['meaning'];

interface Count {
  readonly meaning: Meaning;
  readonly text: string;
  readonly sheet: string;
  readonly cell: string;
  count: number;
}

/** Texts of one meaning that are listed one by one. */
const listed = 40;

/** Counts what value cells hold and how it was taken: every text by itself, numbers together. */
export class ValueTally {
  readonly #counts = new Map<string, Count>();
  #numbers: Count | null = null;

  /** @param at where the cell is */
  add(
    cell: Cell | null,
    read: ReadNumber,
    at: () => { readonly sheet: string; readonly cell: string }
  ): void {
    if (cell?.kind === 'number') {
      if (this.#numbers) this.#numbers.count++;
      else this.#numbers = { meaning: 'number', text: cell.raw, ...at(), count: 1 };
      return;
    }
    const meaning = meaningOf(cell, read);
    const text = cell?.raw.trim() ?? '';
    const key = meaning === 'number written as text' ? meaning : `${meaning}\u0000${text}`;
    const known = this.#counts.get(key);
    if (known) known.count++;
    else this.#counts.set(key, { meaning, text, ...at(), count: 1 });
  }

  /** Numbers first, then each text in the order of the file; the many texts of one meaning beyond some are counted together. */
  all(): readonly ValueMeaning[] {
    const seen = new Map<Meaning, number>();
    const all: ValueMeaning[] = this.#numbers ? [{ ...this.#numbers, texts: 1 }] : [];
    const more = new Map<Meaning, ValueMeaning>();
    for (const count of this.#counts.values()) {
      const before = seen.get(count.meaning) ?? 0;
      seen.set(count.meaning, before + 1);
      if (before < listed) all.push({ ...count, texts: 1 });
      else {
        const rest = more.get(count.meaning);
        more.set(count.meaning, {
          ...(rest ?? count),
          count: (rest?.count ?? 0) + count.count,
          texts: (rest?.texts ?? 0) + 1
        });
      }
    }
    return [...all, ...more.values()];
  }
}

function meaningOf(cell: Cell | null, read: ReadNumber): Meaning {
  switch (read.state) {
    case 'value':
      return cell?.kind === 'date' ? 'date' : 'number written as text';
    case 'below':
      return 'below a limit';
    case 'above':
      return 'above the range';
    case 'unusable':
      return 'not usable';
    default:
      return read.state;
  }
}
