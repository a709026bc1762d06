import type { CalibrationSetView } from '$lib/views/calibration';

/** What the grids of the levels begin with. */
export interface LevelsFormData {
  readonly set: Pick<CalibrationSetView, 'id' | 'name' | 'version' | 'levelList' | 'concentrations'>;
  readonly panel: readonly { readonly id: string; readonly role: string; readonly name: string }[];
}
