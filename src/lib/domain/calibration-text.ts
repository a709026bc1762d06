import type { CalibrationModelName, CalibrationWeighting } from './vocabulary';

const models: Readonly<Record<CalibrationModelName, string>> = {
  'average response factor': 'average response factor',
  linear: 'straight line',
  quadratic: 'quadratic curve'
};

/** What a kind of line is called: "straight line". */
export const modelText = (model: CalibrationModelName): string => models[model];

/** "unweighted", "weighted 1/x²" */
export const weightingText = (weighting: CalibrationWeighting): string =>
  weighting === 'none' ? 'unweighted' : `weighted ${weighting.replace('x2', 'x²')}`;

/** How a line is drawn, as it is said: "straight line, weighted 1/x". An average response factor has its weighting built in. */
export function fitText(model: CalibrationModelName, weighting: CalibrationWeighting): string {
  return model === 'average response factor'
    ? modelText(model)
    : `${modelText(model)}, ${weightingText(weighting)}`;
}

/** r² with as many digits, four at least, as keep a line that is not perfect from reading 1. */
export function r2Text(r2: number): string {
  let decimals = 4;
  while (decimals < 10 && r2 < 1 && Number(r2.toFixed(decimals)) === 1) decimals += 1;
  return r2.toFixed(decimals);
}
