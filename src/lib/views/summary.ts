import type { PortionsView, ResultsTableView, RuleView, StageFindings } from './findings';
import type { MassBalanceView } from './mass-balance';
import type { ValidationView } from './validation';
import type { WalkBackView } from './walk-back';

export interface SummaryExperiment {
  readonly number: number;
  readonly title: string;
  readonly href: string;
  /** "7 spiked, 3 unspiked" */
  readonly portions: string;
  readonly medium: string;
  readonly matrix: string;
  readonly level: string;
  readonly subtracts: string;
  readonly performedOn: string | null;
  readonly analyst: string | null;
  readonly calibration: string | null;
  /** Variants it stands for. */
  readonly standsFor: readonly string[];
  readonly fractions: readonly string[];
}

export interface SummaryAnalyte {
  readonly panelEntryId: string;
  readonly name: string;
  readonly cas: string | null;
  readonly role: string;
  readonly class: string;
  readonly internalStandard: string | null;
  readonly criteria: string;
  readonly properties: readonly {
    readonly label: string;
    readonly value: string;
    readonly unit: string;
    readonly source: string;
  }[];
}

export interface SummaryVariant {
  readonly code: string;
  readonly name: string;
  readonly description: string;
  readonly steps: readonly {
    readonly stage: string;
    readonly kind: string;
    readonly instruction: string;
    readonly parameters: string;
  }[];
}

/** What was found of one variant, or of an experiment that stands for none. */
export interface SummaryFindings {
  readonly key: string;
  readonly heading: string;
  readonly findings: StageFindings | null;
  readonly results: ResultsTableView;
  readonly balance: MassBalanceView;
  readonly walkBack: WalkBackView | null;
  readonly portions: PortionsView;
}

export interface SummaryCalibration {
  readonly name: string;
  readonly instrument: string;
  readonly calibratedOn: string;
  readonly levels: number;
  readonly rows: readonly {
    readonly panelEntryId: string;
    readonly name: string;
    readonly choice: string;
    readonly points: number | null;
    readonly r2: number | null;
    readonly rse: number | null;
    /** What its rules say, or why there is no line. */
    readonly says: string;
    readonly holds: boolean | null;
    readonly href: string | null;
  }[];
}

export interface SummaryExclusion {
  readonly experiment: number;
  readonly what: string;
  readonly cause: string;
  readonly by: string;
  readonly at: string;
  readonly lifted: string | null;
  readonly href: string;
}

export interface SummaryImport {
  readonly fileName: string;
  readonly sha256: string;
  readonly byteSize: number;
  readonly state: string;
  readonly storedAt: string | null;
  readonly storedBy: string | null;
  readonly endReason: string | null;
  readonly href: string;
}

/** One thing a reviewer looks at first. */
export interface LookAt {
  readonly title: 'Deviations' | 'Flagged figures' | 'Exclusions' | 'Gaps' | 'Late changes';
  readonly items: readonly { readonly text: string; readonly href: string | null }[];
  /** What is said where there are none. */
  readonly none: string;
}

/** The validation summary: page, workbook and print render this one view. */
export interface SummaryView {
  readonly study: {
    readonly code: string;
    readonly title: string;
    readonly matrix: string;
    readonly objective: string;
    readonly sampleVolumeMl: number | null;
    readonly state: string;
    readonly revision: number;
    readonly dataVersion: number;
    readonly owner: string;
  };
  readonly lab: { readonly name: string; readonly isDemo: boolean };
  /** The beginning of the SHA-256 of all that follows here: two summaries with one hash say the same. */
  readonly hash: string;
  readonly lookAt: readonly LookAt[];
  readonly criteria: { readonly name: string; readonly version: number; readonly rules: readonly RuleView[] };
  readonly panel: readonly SummaryAnalyte[];
  readonly variants: readonly SummaryVariant[];
  readonly stages: readonly {
    readonly number: number;
    readonly name: string;
    readonly experiments: readonly SummaryExperiment[];
  }[];
  readonly findings: readonly SummaryFindings[];
  readonly validation: ValidationView;
  readonly calibrations: readonly SummaryCalibration[];
  readonly exclusions: readonly SummaryExclusion[];
  readonly imports: readonly SummaryImport[];
  readonly cautions: readonly string[];
}
