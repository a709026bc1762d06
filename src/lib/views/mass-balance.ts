import type { RecoveryBand } from '$lib/domain/recovery-band';
import type { CountsAs } from '$lib/domain/vocabulary';
import type { Verdict } from './verdict';

/** A fraction in the one order of the application; `slot` picks its colour and texture (see charts/fraction-slots). */
export interface MassBalanceFraction {
  readonly key: string;
  readonly name: string;
  readonly countsAs: CountsAs;
  readonly slot: number;
}

/** What one fraction holds of an analyte, in percent of the spike, net of what is subtracted. */
export interface MassBalanceSegment {
  readonly fractionKey: string;
  readonly name: string;
  readonly countsAs: CountsAs;
  readonly mean: number;
  /** In how many replicates it was not detected. */
  readonly notDetected: number;
  /** Opens its provenance. */
  readonly href: string;
}

/** The method recovery: the only part that is judged. Percent of the spike. */
export interface MassBalanceMethod {
  readonly mean: number;
  readonly n: number;
  /** Half of the confidence interval; null when n or the subtracted amount allows none. */
  readonly halfWidth: number | null;
  readonly sd: number | null;
  readonly rsd: number | null;
  readonly interval: { readonly lower: number; readonly upper: number; readonly level: number } | null;
}

export interface MassBalanceRow {
  readonly panelEntryId: string;
  readonly name: string;
  readonly role: string;
  /** Class of substance, for ordering and reading; empty when the library has none. */
  readonly class: string;
  /** null: no verdict can be formed; `reasons` says why. */
  readonly verdict: Verdict | null;
  readonly reasons: readonly string[];
  readonly method: MassBalanceMethod | null;
  readonly segments: readonly MassBalanceSegment[];
  /** Lost at later stages after what was found, in points; null when unknown. */
  readonly downstream: number | null;
  /** Not found anywhere, in points; negative when more was found than was spiked; null when unknown. */
  readonly open: number | null;
  /** True when the open part differs from zero at the level of its interval: only then is it drawn. */
  readonly openSignificant: boolean;
  /** Sum over all fractions, percent of the spike. */
  readonly total: number | null;
  /** What the balance lacks, as a sentence; null when it is complete. */
  readonly incomplete: string | null;
  /** What it rests on that the checks of its sequence put in doubt; null: nothing. */
  readonly flagged: string | null;
  /** Opens the provenance of the method recovery. */
  readonly href: string;
}

export interface MassBalanceView {
  /** What the study asks of a mean recovery; null: it has no such rule, and no band is drawn. */
  readonly criteria: RecoveryBand | null;
  readonly fractions: readonly MassBalanceFraction[];
  readonly rows: readonly MassBalanceRow[];
}
