import type { Archive } from './archive';
import type { ReadingLimits } from './limits';
import { outOfProportion } from './refusal';
import { scanXml } from './scan-xml';
import type { TextStore } from './sheet-builder';

/**
 * Reads the shared texts completely before any sheet, wherever in the archive they stand, so that a cell can never
 * show the number of its text instead of the text.
 *
 * @returns for each shared text its index in the store
 */
export async function readSharedStrings(
  archive: Archive,
  part: string,
  limits: ReadingLimits,
  store: TextStore
): Promise<readonly number[]> {
  const indexes: number[] = [];
  const pieces = new TextPieces();
  await scanXml(archive, part, limits, {
    open(name) {
      if (name === 'si') pieces.start();
      else pieces.open(name);
    },
    text(text) {
      pieces.text(text);
    },
    close(name) {
      pieces.close(name);
      if (name !== 'si') return;
      if (indexes.length >= limits.sharedTexts)
        throw outOfProportion(`This file holds more than ${limits.sharedTexts} shared texts.`);
      indexes.push(store.indexOf(pieces.take()));
    }
  });
  return indexes;
}

/** Joins the runs of a rich text; what only says how to pronounce it (rPh) is left out. */
export class TextPieces {
  #text = '';
  #inText = false;
  #inPhonetic = false;

  start(): void {
    this.#text = '';
  }

  open(name: string): void {
    if (name === 'rPh') this.#inPhonetic = true;
    else if (name === 't') this.#inText = !this.#inPhonetic;
  }

  text(text: string): void {
    if (this.#inText) this.#text += text;
  }

  close(name: string): void {
    if (name === 't') this.#inText = false;
    else if (name === 'rPh') this.#inPhonetic = false;
  }

  take(): string {
    const text = unescapeText(this.#text);
    this.#text = '';
    return text;
  }
}

/** Characters that XML cannot hold are written _xHHHH_ in workbooks (ECMA-376 part 1, 22.9.2.19). */
export function unescapeText(text: string): string {
  if (!text.includes('_x')) return text;
  return text.replace(/_x([0-9a-f]{4})_/gi, (_, code: string) => String.fromCharCode(parseInt(code, 16)));
}
