/** What can be said of a procedure step in figures; everything else stands in its instruction. */
export interface StepParameters {
  readonly ph?: number;
  readonly solvent?: string;
  readonly volumeMl?: number;
  readonly minutes?: number;
  readonly temperatureC?: number;
}
