import { detectionLimits, StatsError } from '../../stats';
import type { Calibration } from '../calibration';
import { isCounted, methodPlaces, type Preparation } from './preparations';

/** Detection and quantitation limit that the scatter of a calibration line gives, of the instrument alone. */
export type CalibrationLimit =
  | {
      readonly available: true;
      readonly calibration: Extract<Calibration, { usable: true }>;
      /** SD of the response at the lowest level, and the slope there. */
      readonly sigma: number;
      readonly slope: number;
      readonly lowest: number;
      /** On the scale of the line: ng/mL, or the ratio of concentrations. */
      readonly lod: number;
      readonly loq: number;
      /** As amounts in the whole extract, ng, and in the sample, ng/L; null where they cannot be told. */
      readonly lodNg: number | null;
      readonly lodNgPerL: number | null;
      readonly loqNgPerL: number | null;
    }
  | { readonly available: false; readonly reason: string };

/**
 * 3.3 sigma/slope and 10 sigma/slope of one line. sigma is the residual SD of the line at its lowest level: s/sqrt(w(x)), which is
 * s itself without weights. They become amounts by what one unit of the line was worth in the preparations (dilution, volume,
 * share or internal standard), which needs a single fraction that counts for the method.
 */
export function calibrationLimit(
  calibration: Calibration,
  preparations: readonly Preparation[]
): CalibrationLimit {
  if (!calibration.usable) return { available: false, reason: calibration.reason };
  const { fit } = calibration;
  const [lowest] = fit.range;
  const sigma = fit.residualSd * spreadAt(lowest, fit.weighting);
  const slope = slopeAt(fit, lowest);
  let limits: { readonly lod: number; readonly loq: number };
  try {
    limits = detectionLimits({ sigma, slope });
  } catch (error) {
    if (error instanceof StatsError) return { available: false, reason: error.message };
    throw error;
  }
  const counted = preparations.filter(isCounted);
  const worth = meanOf(counted.map(ngOfOne));
  const perLitre = meanOf(
    counted.map((item) => {
      const ng = ngOfOne(item);
      const volume = item.portion.replicate.sampleVolumeMl;
      return ng === null || volume === null ? null : (1000 * ng) / volume;
    })
  );
  return {
    available: true,
    calibration,
    sigma,
    slope,
    lowest,
    ...limits,
    lodNg: worth === null ? null : limits.lod * worth,
    lodNgPerL: perLitre === null ? null : limits.lod * perLitre,
    loqNgPerL: perLitre === null ? null : limits.loq * perLitre
  };
}

/** 1/sqrt(w): how much wider than at weight 1 the response scatters at a level. */
function spreadAt(x: number, weighting: 'none' | '1/x' | '1/x2'): number {
  return { none: 1, '1/x': Math.sqrt(x), '1/x2': x }[weighting];
}

function slopeAt(fit: Extract<Calibration, { usable: true }>['fit'], x: number): number {
  const [first = 0, second = 0, third = 0] = fit.coefficients;
  switch (fit.model) {
    case 'average response factor':
      return first;
    case 'linear':
      return second;
    case 'quadratic':
      return second + 2 * third * x;
  }
}

/** ng in the fraction for one unit of the line; null where it did not come from a line or from several fractions. */
function ngOfOne({ portion }: Preparation): number | null {
  const places = methodPlaces(portion);
  const [place] = places;
  if (!place || places.length !== 1) return null;
  const [used] = place.found.used;
  if (!used || used.state !== 'amount') return null;
  const { x, calibration } = used.trace;
  return calibration === null || x === null || !(x > 0) ? null : used.ng / x;
}

function meanOf(values: readonly (number | null)[]): number | null {
  if (values.length === 0 || values.some((value) => value === null)) return null;
  return values.reduce<number>((sum, value) => sum + (value ?? 0), 0) / values.length;
}
