import type { RecoveryBand } from '$lib/domain/recovery-band';
import type { StageKind } from '$lib/domain/stages';
import type { Verdict } from './verdict';

/** One analyte on a strip. */
export interface StagePoint {
  readonly panelEntryId: string;
  readonly name: string;
  /**
   * Whole method: recovery in percent. Loss stages: `lost`, in points of 100 in the sample. Signal stages: bias of
   * the signal in percent.
   */
  readonly value: number;
  /** Only where criteria apply. */
  readonly verdict: Verdict | null;
  readonly href: string;
}

export interface StageExperiment {
  readonly title: string;
  readonly href: string;
  /** "7 spiked, 3 unspiked, 3 blanks" */
  readonly detail: string;
}

export interface StageReach {
  readonly key: string;
  readonly name: string;
  /** Counted from the mouth: the instrument is 1. */
  readonly number: number;
  readonly kind: StageKind;
  readonly href: string;
  readonly experiments: readonly StageExperiment[];
  /** Median over the analytes of what is left of 100 below this reach; null where nothing was measured. */
  readonly remaining: number | null;
  readonly points: readonly StagePoint[];
  /** What stands in words: "calibration accepted". */
  readonly status: { readonly verdict: Verdict | null; readonly text: string } | null;
  /** Why the strip is empty or lacks analytes, and the first step; null when it is complete. */
  readonly gap: {
    readonly text: string;
    readonly href: string | null;
    readonly action: string | null;
  } | null;
}

export interface StageLadderView {
  /** What the study asks of a mean recovery; null: it has no such rule, and no band is drawn. */
  readonly criteria: RecoveryBand | null;
  /** What the extract holds, held against the criteria. */
  readonly wholeMethod: {
    /** "what the extract holds, variant D" */
    readonly note: string;
    readonly href: string;
    readonly points: readonly StagePoint[];
  };
  /** From the source (sample) to the mouth (detector). */
  readonly reaches: readonly StageReach[];
}
