export type RefusalCode =
  | 'empty'
  | 'too large'
  | 'protected'
  | 'older workbook'
  | 'other format'
  | 'not a workbook'
  | 'damaged'
  | 'out of proportion'
  | 'took too long'
  | 'took too much memory'
  | 'failed';

/** The file cannot be read at all. The message is a whole sentence for the person who brought the file. */
export class Refusal extends Error {
  readonly code: RefusalCode;

  constructor(code: RefusalCode, message: string) {
    super(message);
    this.name = 'Refusal';
    this.code = code;
  }
}

export function damaged(what: string): Refusal {
  return new Refusal(
    'damaged',
    `This workbook is damaged: ${what}. Open it in the program it came from and save it again; nothing was stored.`
  );
}

export function outOfProportion(what: string): Refusal {
  return new Refusal(
    'out of proportion',
    `${what} Nothing was stored. Bring the table alone, in a workbook of its own.`
  );
}
