/** What a study asks of a mean recovery, percent; a missing end is open. */
export interface RecoveryBand {
  readonly low: number | null;
  readonly high: number | null;
}

/** The limits that there are, for texts that must not round a figure onto one. */
export const bandLimits = (band: RecoveryBand | null): readonly number[] =>
  [band?.low ?? null, band?.high ?? null].filter((limit) => limit !== null);

/** "70 to 130 %", "at least 70 %", "at most 130 %"; null where there is nothing to hold a recovery against. */
export function bandText(band: RecoveryBand | null): string | null {
  if (band === null) return null;
  if (band.low !== null && band.high !== null) return `${band.low} to ${band.high} %`;
  if (band.low !== null) return `at least ${band.low} %`;
  return band.high === null ? null : `at most ${band.high} %`;
}
