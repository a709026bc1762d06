import type { CriteriaOverride } from '../domain/criteria';
import type { PanelRole } from '../domain/vocabulary';
import type { AnalyteBrief, NameMatch } from './library';

export interface PanelEntryView {
  readonly id: string;
  readonly position: number;
  readonly role: PanelRole;
  readonly analyte: AnalyteBrief;
  /** The library has a newer version than the one pinned here. */
  readonly hasNewer: boolean;
  readonly internalStandard: { readonly id: string; readonly name: string } | null;
  readonly criteriaOverride: CriteriaOverride | null;
  /** Reported values rest on it, so that it cannot leave the panel. */
  readonly hasData: boolean;
  /** When it was last changed: sent back with a change, so that two people do not save over each other. */
  readonly seen: string;
}

/** What became of a pasted list. */
export interface PanelPaste {
  readonly added: readonly { readonly id: string; readonly line: string; readonly name: string }[];
  /** Was on the panel before, or stands in the list twice. */
  readonly already: readonly { readonly line: string; readonly name: string }[];
  readonly notFound: readonly NameMatch[];
}
