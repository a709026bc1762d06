import type { CalibrationModelName, CalibrationWeighting } from '$lib/domain/vocabulary';

/** How a line is drawn, as it is said: "straight line, weighted 1/x". */
export function fitText(model: CalibrationModelName, weighting: CalibrationWeighting): string {
  if (model === 'average response factor') return 'average response factor';
  const line = model === 'linear' ? 'straight line' : 'quadratic curve';
  return weighting === 'none' ? `${line}, unweighted` : `${line}, weighted ${weighting}`;
}
