import type { ImportState, MeasurementState } from '$lib/domain/vocabulary';

export const importStateWords: Readonly<Record<ImportState, string>> = {
  received: 'Received, not stored yet',
  stored: 'Stored',
  dropped: 'Left unstored',
  superseded: 'Superseded',
  withdrawn: 'Withdrawn'
};

export const measurementStateWords: Readonly<Record<MeasurementState, string>> = {
  value: 'value',
  'not detected': 'not detected',
  below: 'below its limit',
  above: 'above range',
  missing: 'missing'
};

/** "1 value", "1,204 values". */
export const valuesText = (count: number): string =>
  `${count.toLocaleString('en')} ${count === 1 ? 'value' : 'values'}`;

export function sizeText(bytes: number): string {
  if (bytes < 1024) return `${bytes} bytes`;
  if (bytes < 1024 * 1024) return `${Math.round(bytes / 1024)} kB`;
  return `${(bytes / 1024 / 1024).toFixed(1)} MB`;
}
