import type { ReportedBasis } from '../../domain/vocabulary';

/**
 * What turns a unit into ours: value × times ÷ per. One of the two is always 1, so that a conversion is one correctly rounded
 * operation (0.3 µL is 0.3 / 1000 mL and not 0.3 × 0.001).
 */
export interface UnitFactor {
  readonly times: number;
  readonly per: number;
}

export type UnitTarget = Exclude<ReportedBasis, 'area'> | 'mL' | 'share' | 'g' | 'min';

export const unchanged: UnitFactor = { times: 1, per: 1 };
const times = (factor: number): UnitFactor => ({ times: factor, per: 1 });
const per = (divisor: number): UnitFactor => ({ times: 1, per: divisor });

/** Keys are written in lower case, with u for µ and without spaces. */
const factors: Readonly<Record<UnitTarget, Readonly<Record<string, UnitFactor>>>> = {
  vial: {
    'ng/ml': unchanged,
    'ug/l': unchanged,
    'pg/ul': unchanged,
    'ug/ml': times(1000),
    'mg/l': times(1000),
    'ng/ul': times(1000),
    'pg/ml': per(1000),
    'ng/l': per(1000)
  },
  ng_per_l: {
    'ng/l': unchanged,
    'pg/ml': unchanged,
    'ug/l': times(1000),
    'ng/ml': times(1000),
    'mg/l': times(1_000_000),
    'ug/ml': times(1_000_000),
    'pg/l': per(1000)
  },
  ng: { ng: unchanged, ug: times(1000), mg: times(1_000_000), pg: per(1000) },
  mL: { ml: unchanged, l: times(1000), ul: per(1000) },
  share: { '': unchanged, '%': per(100) },
  g: { g: unchanged, mg: per(1000), kg: times(1000) },
  min: { min: unchanged, s: per(60), sec: per(60) }
};

/** Units so short that a name can end in one by chance: they count in brackets only. */
const markedTargets: readonly UnitTarget[] = ['g', 'min'];

/** The spelling under which units are compared: µg/L, ug/l, µg L⁻¹ and µg per L are one. */
export function unitKey(text: string): string {
  return text
    .normalize('NFKC')
    .toLowerCase()
    .replace(/[µμ]/g, 'u')
    .replace(/\s*(?:per)\s*/g, '/')
    .replace(/^([a-z]+)\s*[·*]?\s*([a-z]+)\s*(?:\^)?[-−–]1$/, '$1/$2')
    .replace(/\s+/g, '');
}

export function isUnit(text: string): boolean {
  const key = unitKey(text);
  return (
    key !== '' &&
    Object.entries(factors).some(
      ([target, units]) => !markedTargets.includes(target as UnitTarget) && Object.hasOwn(units, key)
    )
  );
}

/** Whether a text in brackets is a unit that would not count without them. */
export function isMarkedUnit(text: string): boolean {
  const key = unitKey(text);
  return markedTargets.some((target) => Object.hasOwn(factors[target], key));
}

export function isConcentration(text: string): boolean {
  const key = unitKey(text);
  return Object.hasOwn(factors.vial, key) || Object.hasOwn(factors.ng_per_l, key);
}

export function isAmount(text: string): boolean {
  return Object.hasOwn(factors.ng, unitKey(text));
}

/** @returns null for a unit that does not measure what is asked for */
export function unitFactor(text: string, target: UnitTarget): UnitFactor | null {
  const key = unitKey(text);
  return Object.hasOwn(factors[target], key) ? (factors[target][key] ?? null) : null;
}

export function convert(value: number, { times, per }: UnitFactor): number {
  return per === 1 ? value * times : value / per;
}
