/** What a file may at most ask of the reader. Plain data: it travels to the child process. */
export interface ReadingLimits {
  /** Bytes of the uploaded file. */
  readonly fileBytes: number;
  /** Files inside the workbook's archive. */
  readonly entries: number;
  /** Bytes after inflating, all parts together, each as often as it is read. */
  readonly inflatedBytes: number;
  /** Inflated : packed bytes of one part, looked at above `ratioFromBytes` (sheets of real data stay below 50). */
  readonly ratio: number;
  readonly ratioFromBytes: number;
  readonly sheets: number;
  readonly rows: number;
  readonly columns: number;
  /** Filled cells, all sheets together. */
  readonly cells: number;
  /** Texts that a workbook shares between cells. */
  readonly sharedTexts: number;
  /** Characters of one cell. */
  readonly textLength: number;
  /** Bytes from one tag to the next, the tag included. */
  readonly tokenBytes: number;
  /** Elements inside each other. */
  readonly depth: number;
  /** Merged blocks of one sheet, and the columns they cover, each block counted. */
  readonly merges: number;
  readonly mergedColumns: number;
}

export const readingLimits: ReadingLimits = {
  fileBytes: 64 * 1024 * 1024,
  entries: 5_000,
  inflatedBytes: 512 * 1024 * 1024,
  ratio: 200,
  ratioFromBytes: 8 * 1024 * 1024,
  sheets: 256,
  rows: 500_000,
  columns: 16_384,
  cells: 5_000_000,
  sharedTexts: 1_000_000,
  textLength: 65_536,
  tokenBytes: 512 * 1024,
  depth: 64,
  merges: 100_000,
  mergedColumns: 1_000_000
};
