import type { CalibrationModelName, CalibrationWeighting } from '$lib/domain/vocabulary';

/** How a line is drawn, as it is said: "straight line, weighted 1/x". */
export function fitText(model: CalibrationModelName, weighting: CalibrationWeighting): string {
  if (model === 'average response factor') return 'average response factor';
  const line = model === 'linear' ? 'straight line' : 'quadratic curve';
  return weighting === 'none' ? `${line}, unweighted` : `${line}, weighted ${weighting}`;
}

/** r² with as many digits, four at least, as keep a line that is not perfect from reading 1. */
export function r2Text(r2: number): string {
  let decimals = 4;
  while (decimals < 10 && r2 < 1 && Number(r2.toFixed(decimals)) === 1) decimals += 1;
  return r2.toFixed(decimals);
}
