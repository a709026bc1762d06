import type { ColumnMeaning, Orientation } from '$lib/schemas/column-map';
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

/** What one column of a sheet means; of a turned sheet, one row. */
export interface LineMeaningView {
  /** Zero-based, as the map counts it. */
  readonly line: number;
  /** "B", or the number of the row. */
  readonly name: string;
  readonly header: string;
  readonly means: ColumnMeaning;
  readonly analyte: string | null;
  readonly basis: 'vial' | 'ng' | 'ng_per_l' | null;
  readonly unit: string | null;
}

/** How the table of one sheet is read. */
export interface TableMapView {
  readonly orientation: Orientation;
  /** As the sheet counts them, from 1; columns of a turned sheet count so too. */
  readonly headerLines: readonly number[];
  readonly blocks: 'repeat their header' | 'share one header' | null;
  /** Where a name stands that the rows lack: "sheet name", "block title" or a cell; null: in the rows. */
  readonly carried: Readonly<Record<'sample' | 'fraction' | 'analyte', string | null>>;
  /** The other sheets that are read alike. */
  readonly alike: readonly string[];
  readonly lines: readonly LineMeaningView[];
}

/** What one sample label of the file was found to mean. */
export interface LabelView {
  readonly label: string;
  /** The first row that has it; cell null: it stands in the sheet's name. */
  readonly sheet: string;
  readonly cell: string | null;
  /** Rows. */
  readonly count: number;
  readonly how: 'name' | 'pattern' | 'run order' | 'assigned' | 'left out' | 'ambiguous' | 'not found';
  /** In words; null: none. */
  readonly place: string | null;
  /** Of one that was not found the nearest names, of an ambiguous one what it can mean. */
  readonly nearest: readonly string[];
}

/** Places that a label can be given. */
export interface PlaceGroup {
  readonly title: string;
  readonly places: readonly { readonly value: string; readonly label: string }[];
  readonly fractions: readonly { readonly id: string; readonly name: string }[];
}

/** How a file is read, and what of it a person can change. */
export interface FileMapView {
  readonly source: 'recognised' | 'kept' | 'changed';
  /** The kept layout that applied by itself. */
  readonly kept: { readonly name: string; readonly version: number } | null;
  readonly samplePattern: string | null;
  readonly isPatternConfirmed: boolean;
  readonly matching: 'names' | 'run order';
  readonly fixed: { readonly experiment: string | null; readonly fraction: string | null };
  /** Those that need a look first. */
  readonly labels: readonly LabelView[];
  readonly labelCount: number;
  readonly places: readonly PlaceGroup[];
  readonly analytes: readonly string[];
  readonly texts: readonly {
    readonly text: string;
    readonly meaning: string;
    readonly count: number;
    readonly texts: number;
    readonly sheet: string;
    readonly cell: string;
  }[];
  readonly mends: readonly {
    readonly sheet: string;
    readonly cell: string;
    readonly text: string;
    readonly original: string;
  }[];
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
  /** What lies over the sheet; null: nothing of it is read. */
  readonly map: TableMapView | null;
  readonly columns: readonly { readonly letter: string }[];
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

/** One value of a difference, and the cell it stands in. */
export interface DifferenceValue {
  readonly state: MeasurementState;
  readonly reported: number | null;
  readonly limit: number | null;
  readonly internalArea: number | null;
  readonly injection: number;
  readonly where: string;
}

/** What a file would change of the values that count now. */
export interface DifferenceView {
  readonly changed: number;
  readonly added: number;
  /** Values of the files it covers for which it holds nothing: they go on counting unless those files are superseded. */
  readonly gone: number;
  readonly same: number;
  /** The files whose values it covers. */
  readonly files: readonly { readonly id: string; readonly fileName: string }[];
  /** Changed ones first, then gone, then added; the first few hundred. */
  readonly rows: readonly {
    readonly kind: 'changed' | 'added' | 'gone';
    readonly place: string;
    readonly analyte: string;
    readonly before: readonly DifferenceValue[];
    readonly after: readonly DifferenceValue[];
  }[];
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
  /** null where the file cannot be read. */
  readonly map: FileMapView | null;
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
  /** Against what counts now; null where nothing is covered. */
  readonly difference: DifferenceView | null;
  /** Things to know that no cell is to blame for. */
  readonly remarks: readonly string[];
}
