import type { ColumnMap, Orientation } from '../../schemas/column-map';
import type { LabelView } from '../../views/imports';
import type {
  AdditionPoint,
  CheckStandardKind,
  MeasurementState,
  PanelRole,
  ReplicateKind,
  ReportedBasis
} from '../../domain/vocabulary';

/**
 * What a cell can hold. `formula` is a formula without a stored result; `error` is a failed formula
 * (#DIV/0!, #N/A). A date keeps the serial number it is stored as, counted from 1900 whatever the file
 * counts from.
 */
export type Cell =
  | { readonly kind: 'number'; readonly value: number; readonly raw: string }
  | { readonly kind: 'text'; readonly value: string; readonly raw: string }
  | { readonly kind: 'boolean'; readonly value: boolean; readonly raw: string }
  | { readonly kind: 'date'; readonly value: number; readonly raw: string }
  | { readonly kind: 'error'; readonly value: string; readonly raw: string }
  | { readonly kind: 'formula'; readonly value: null; readonly raw: string };

/** A merged block, zero-based, ends included. Only its top left cell holds something. */
export interface Merge {
  readonly top: number;
  readonly left: number;
  readonly bottom: number;
  readonly right: number;
}

/**
 * One sheet, sparse, in columns of plain arrays, so that two million cells fit in some ten megabytes and travel
 * between processes cheaply. Read it through `cellAt`, `rowCells` and `rowNumbers` of `sheet.ts`.
 *
 * The cells of the k-th row that holds something (number `rowNumbers[k]`, zero-based, ascending) are
 * `rowStarts[k]` up to but not including `rowStarts[k + 1]`; within a row columns ascend.
 */
export interface Sheet {
  readonly name: string;
  readonly hidden: boolean;
  /** One more than the last row and column that hold something. */
  readonly rowCount: number;
  readonly columnCount: number;
  readonly rowNumbers: Uint32Array;
  readonly rowStarts: Uint32Array;
  readonly columns: Uint16Array;
  /** Index into `cellKinds` of sheet.ts. */
  readonly kinds: Uint8Array;
  /** The number, serial date or 0/1; for text, error and formula the index into `texts`. */
  readonly values: Float64Array;
  readonly texts: readonly string[];
  readonly merges: readonly Merge[];
}

export type FileKind = 'xlsx' | 'csv';

export interface Workbook {
  readonly kind: FileKind;
  /** For text files: how the bytes were read. */
  readonly encoding: string | null;
  readonly separator: ',' | ';' | '\t' | null;
  readonly sheets: readonly Sheet[];
}

/** Which mark parts the decimals in cells that hold a number as text. */
export type DecimalMark = 'point' | 'comma';

export interface ReplicateExpectation {
  readonly id: string;
  readonly label: string;
  readonly kind: ReplicateKind;
  /** False where the replicate has no fractions (a solvent standard): the fraction cell stays empty. */
  readonly takesFraction: boolean;
  /** Final volume (mL) already on record for all of it; null: the file has to bring it where it is needed. */
  readonly finalVolumeMl: number | null;
  /** On record, to be held against what the file says; null or left out: not on record. */
  readonly sampleVolumeMl?: number | null;
  readonly sampleMassG?: number | null;
  /** ISO 8601, in UTC; null or left out: not on record. */
  readonly collectedAt?: string | null;
  readonly extractedAt?: string | null;
  /** Amounts (ng) by panel entry id that it received in place of those of its experiment. */
  readonly spikesNg?: Readonly<Record<string, number>>;
}

export interface FractionExpectation {
  readonly id: string;
  readonly name: string;
}

export interface ExperimentExpectation {
  readonly id: string;
  readonly title: string;
  /** The set its areas are read by: of levels and checks that go by one name in several sets, its own is meant. */
  readonly calibrationSetId: string | null;
  readonly replicates: readonly ReplicateExpectation[];
  readonly fractions: readonly FractionExpectation[];
  /** Amounts (ng) added to a replicate of each kind, by panel entry id; left out: not known. */
  readonly spikesNg?: Readonly<Partial<Record<ReplicateKind, Readonly<Record<string, number>>>>>;
  /** How long a portion may wait, in days; null or left out: no rule. */
  readonly holdingDays?: {
    readonly collectionToExtraction: number | null;
    readonly extractionToAnalysis: number | null;
  };
}

export interface PanelExpectation {
  /** Panel entry id. */
  readonly id: string;
  readonly name: string;
  readonly synonyms: readonly string[];
  readonly cas: string | null;
  readonly role: PanelRole;
  /** The standard that corrects it, and where that goes in; null: calibrated externally. */
  readonly internalStandard: { readonly panelEntryId: string; readonly point: AdditionPoint } | null;
  /** Whether a lowest calibration level is known, which then is the limit of a bare "ND". */
  readonly hasLowestLevel: boolean;
  /** Lowest and highest calibration level in the vial, ng/mL; null or left out: none. */
  readonly levelRange?: { readonly low: number; readonly high: number } | null;
  /** The area that it usually has as an internal standard; null or left out: taken from the file alone. */
  readonly typicalArea?: number | null;
}

export interface CalibrationSetExpectation {
  readonly id: string;
  readonly name: string;
  readonly instrument: string;
  readonly levels: readonly { readonly id: string; readonly name: string }[];
  readonly checks: readonly CheckExpectation[];
}

/** A second-source or continuing check, or an instrument blank, under the name that the sample column gives it. */
export interface CheckExpectation {
  readonly id: string;
  readonly name: string;
  readonly kind: CheckStandardKind;
}

/** What the study offers for a spreadsheet to be matched with: plain data, so that it can go to the child process. */
export interface Expectation {
  readonly experiments: readonly ExperimentExpectation[];
  readonly panel: readonly PanelExpectation[];
  readonly calibrationSets: readonly CalibrationSetExpectation[];
  /** The experiment whose page the file was dropped on; labels are looked up there first. */
  readonly experimentId: string | null;
  /** What the person declared about this file, often in answer to a question; null: not declared. */
  readonly declared: {
    readonly basis: ReportedBasis | null;
    readonly decimal: DecimalMark | null;
    /** What the person said a sample label means, by the label as it stands in the file. */
    readonly assignments?: Readonly<Record<string, Assignment>>;
  };
  /** The places of the planned run in their order; null or left out: the replicates and fractions of the experiment in theirs. */
  readonly runOrder?: readonly Assignment[] | null;
}

/** What a sample label was said to mean. */
export type Assignment =
  | {
      readonly kind: 'replicate';
      readonly experimentId: string;
      readonly replicateId: string;
      /** null: the row names it, or there is one only. */
      readonly fractionId: string | null;
    }
  | { readonly kind: 'level'; readonly levelId: string }
  | { readonly kind: 'check'; readonly checkStandardId: string }
  /** Its rows are not read. */
  | { readonly kind: 'left out' };

export type Place =
  | {
      readonly kind: 'extract';
      readonly experimentId: string;
      readonly replicateId: string;
      readonly fractionId: string | null;
    }
  | { readonly kind: 'level'; readonly calibrationSetId: string; readonly levelId: string }
  | {
      readonly kind: 'check';
      readonly calibrationSetId: string;
      readonly checkStandardId: string;
      readonly checkKind: CheckStandardKind;
    };

/** What an instrument says about a peak beside its area; null where the file does not say. */
export interface Qualifiers {
  readonly retentionTimeMin: number | null;
  readonly ionRatio: number | null;
  readonly signalToNoise: number | null;
  /** null: not marked as integrated by hand. */
  readonly manualIntegration: { readonly cause: string | null } | null;
}

export interface MappedRecord {
  readonly sheet: string;
  /** Zero-based. */
  readonly row: number;
  readonly column: number;
  /** As spreadsheets write it: F18. */
  readonly cell: string;
  readonly place: Place;
  readonly panelEntryId: string;
  /** 1 where the file does not number injections; of a check, counted through the file (see `check-injections.ts`). */
  readonly injection: number;
  readonly reported: {
    readonly kind: ReportedBasis;
    /** In the unit of the kind (area as it is, ng/mL, ng, ng/L); null unless the state is 'value'. */
    readonly value: number | null;
    /** Area of the internal standard in the same injection; only with kind 'area'. */
    readonly internalArea: number | null;
  };
  readonly state: MeasurementState;
  /** The x of "<x" or ">x", in the unit of the kind; null for a bare mark. */
  readonly limit: number | null;
  /** The cell's content as found. */
  readonly rawText: string;
  readonly finalVolumeMl: number | null;
  /** DF, 1 or more; null: not given. Always null with the bases 'ng' and 'ng_per_l', which take none. */
  readonly dilution: number | null;
  /** 0 to 1, 0 excluded; null: not given. Always null with the bases 'ng' and 'ng_per_l'. */
  readonly aliquotShare: number | null;
  /** ISO 8601 without a zone, as the file has it; null: not given. */
  readonly acquiredAt: string | null;
  /** null: the file gives none of them for this value. */
  readonly qualifiers: Qualifiers | null;
}

export type ProblemSeverity = 'error' | 'question' | 'note';

/** Errors block storing, questions want an answer first, notes inform. */
export interface Problem {
  readonly severity: ProblemSeverity;
  readonly code: ProblemCode;
  /** The sheet's name; null: it concerns the whole file. */
  readonly sheet: string | null;
  /** A1; null: it concerns the whole sheet. */
  readonly cell: string | null;
  readonly found: string;
  readonly expected: string;
  /** One or two whole sentences for the screen, naming sheet and cell. */
  readonly message: string;
  /** What the person can do. */
  readonly fix: string;
  /** How a question is answered: by confirming it as it stands, or by declaring something about the file. */
  readonly answer: 'confirm' | 'declare decimal' | 'declare basis' | null;
}

export type ProblemCode =
  // the file as a whole
  | 'nothing recognised'
  | 'other experiment'
  | 'basis unknown'
  | 'basis contradicts'
  | 'missing column'
  | 'column not used'
  | 'column twice'
  | 'unit missing'
  | 'unknown unit'
  | 'sheet not read'
  | 'text encoding'
  // names
  | 'unknown sample'
  | 'ambiguous sample'
  | 'missing sample'
  | 'unknown experiment'
  | 'unknown fraction'
  | 'missing fraction'
  | 'fraction not expected'
  | 'unknown analyte'
  | 'ambiguous analyte'
  | 'ambiguous fraction'
  | 'missing analyte'
  // values
  | 'not a number'
  | 'looks like a number'
  | 'ambiguous separator'
  | 'mixed separators'
  | 'error cell'
  | 'formula without result'
  | 'date in number column'
  | 'negative'
  | 'zero area'
  | 'limit missing'
  | 'not positive'
  | 'share outside range'
  | 'dilution below one'
  | 'injection number'
  | 'date not understood'
  | 'missing part of the map'
  | 'pattern not confirmed'
  | 'run order differs'
  | 'title contradicts'
  | 'qualifier not read'
  // records
  | 'same injection twice'
  | 'check injections unclear'
  | 'internal standard area missing'
  | 'internal standard area twice'
  | 'final volume missing'
  | 'not taken by basis'
  | 'differs within extract'
  | 'differs from record'
  // what the numbers look like
  | 'outside calibration range'
  | 'internal standard outside window'
  | 'far from its fellows'
  | 'ten times off'
  | 'surrogate missing'
  | 'fraction missing in file'
  | 'holding time passed';

/** The columns (zero-based) a sheet's reading uses, so that a page can draw them over the sheet. */
export interface RecognisedColumn {
  readonly column: number;
  readonly header: string;
  readonly meaning:
    | 'sample'
    | 'experiment'
    | 'fraction'
    | 'analyte'
    | 'cas'
    | 'value'
    | 'internal area'
    | 'final volume'
    | 'dilution'
    | 'aliquot share'
    | 'injection'
    | 'acquired at'
    | 'limit'
    | 'retention time'
    | 'ion ratio'
    | 'signal to noise'
    | 'manual integration'
    | 'manual integration cause'
    | 'sample volume'
    | 'sample mass'
    | 'not used';
  readonly unit: string | null;
  /** In the wide layout: whose value or internal standard area it is. */
  readonly panelEntryId: string | null;
}

export interface SheetReading {
  readonly sheet: string;
  readonly layout: 'long' | 'wide';
  readonly orientation: Orientation;
  /** Zero-based row of the header's last line; with analytes down, of the samples' names. */
  readonly headerRow: number;
  readonly basis: ReportedBasis;
  readonly columns: readonly RecognisedColumn[];
  readonly recordCount: number;
}

export interface Reading {
  /** Experiment id on our own template; null for any other file. */
  readonly template: { readonly experimentId: string; readonly layout: 'long' | 'wide' } | null;
  readonly sheets: readonly SheetReading[];
}

/** What was found in the value cells and how it was taken. */
export interface ValueMeaning {
  /** As it stands in the cell; '' for a blank one; of numbers, which are not listed one by one, an example. */
  readonly text: string;
  readonly meaning:
    | 'number'
    | 'number written as text'
    | 'not detected'
    | 'below a limit'
    | 'above the range'
    | 'missing'
    | 'date'
    | 'not usable';
  /** Cells. */
  readonly count: number;
  /** More than one where texts of one meaning are counted together. */
  readonly texts: number;
  /** The first of them. */
  readonly sheet: string;
  readonly cell: string;
}

export interface MappedImport {
  /** What the file was read by. */
  readonly map: ColumnMap;
  /** Which of the kept maps it was that applied by itself; null: none. */
  readonly savedMap: number | null;
  readonly reading: Reading;
  readonly records: readonly MappedRecord[];
  readonly problems: readonly Problem[];
  readonly valueMeanings: readonly ValueMeaning[];
  readonly labels: readonly LabelView[];
}
