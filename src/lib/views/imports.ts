import type { ImportState, MeasurementState, ReportedBasis } from '$lib/domain/vocabulary';

/** One file of a study's list of imports. */
export interface ImportListView {
  readonly id: string;
  readonly fileName: string;
  readonly byteSize: number;
  readonly sha256: string;
  readonly state: ImportState;
  readonly valueCount: number;
  /** Number and title of each experiment it brought values for. */
  readonly experiments: readonly string[];
  readonly receivedAt: string;
  readonly receivedBy: string;
  readonly storedAt: string | null;
  readonly storedBy: string | null;
  readonly endedAt: string | null;
  readonly endedBy: string | null;
  readonly endReason: string | null;
  readonly mayWithdraw: boolean;
}

export interface ProblemView {
  readonly severity: 'error' | 'question' | 'note';
  readonly code: string;
  readonly sheet: string | null;
  readonly cell: string | null;
  readonly found: string;
  readonly expected: string;
  readonly message: string;
  readonly fix: string;
  readonly answer: 'confirm' | 'declare decimal' | 'declare basis' | null;
}

export interface SheetCellView {
  readonly text: string;
  /** A number sits at the right, everything else at the left. */
  readonly numeric: boolean;
  /** The gravest problem of the cell. */
  readonly problem: 'error' | 'question' | 'note' | null;
}

export interface SheetWindowView {
  readonly name: string;
  readonly hidden: boolean;
  readonly rowCount: number;
  readonly columnCount: number;
  /** How it was read; null: nothing of it was taken. */
  readonly read: {
    readonly layout: 'long' | 'wide';
    readonly basis: ReportedBasis;
    /** 1-based, as the sheet shows it. */
    readonly headerRow: number;
    readonly recordCount: number;
  } | null;
  readonly columns: readonly { readonly letter: string; readonly meaning: string | null }[];
  /** The rows shown, 1-based numbers. */
  readonly rows: readonly { readonly number: number; readonly cells: readonly SheetCellView[] }[];
  readonly firstRow: number;
  readonly lastRow: number;
}

export interface RecordView {
  readonly sheet: string;
  readonly cell: string;
  readonly sample: string;
  readonly fraction: string | null;
  readonly analyte: string;
  readonly injection: number;
  readonly state: MeasurementState;
  /** In the unit of the basis; null unless there is a value. */
  readonly value: number | null;
  readonly basis: ReportedBasis;
  readonly internalArea: number | null;
  readonly limit: number | null;
  /** Final volume, dilution and share, in words. */
  readonly applied: string;
}

/** What a received file will become, beside the sheet as it is. */
export interface ImportPreviewView {
  readonly id: string;
  readonly fileName: string;
  readonly byteSize: number;
  readonly sha256: string;
  readonly state: ImportState;
  readonly receivedAt: string;
  readonly receivedBy: string;
  readonly declared: { readonly basis: ReportedBasis | null; readonly decimal: 'point' | 'comma' | null };
  readonly experiment: { readonly number: number; readonly title: string } | null;
  /** The file could not be read at all: why. */
  readonly refusal: string | null;
  readonly sheets: readonly {
    readonly name: string;
    readonly hidden: boolean;
    readonly recordCount: number;
  }[];
  readonly window: SheetWindowView | null;
  readonly records: readonly RecordView[];
  readonly recordCount: number;
  readonly stateCounts: Readonly<Record<MeasurementState, number>>;
  readonly experiments: readonly string[];
  readonly problems: readonly ProblemView[];
  readonly problemCount: number;
  readonly errorCount: number;
  readonly questionCount: number;
  /** Values of earlier imports that these will cover. */
  readonly coveredCount: number;
  readonly coveredFiles: readonly string[];
  /** Things to know that no cell is to blame for. */
  readonly remarks: readonly string[];
}
