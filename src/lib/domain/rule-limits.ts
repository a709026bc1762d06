import type { CriterionRule } from './criteria';

const limit = (value: number, unit: CriterionRule['unit']): string =>
  unit === '%' || unit === 'h' ? `${value} ${unit}` : String(value);

/** "70 to 130 %", "20 % or less", "at least 5". */
export function limitsText({ low, high, unit }: Pick<CriterionRule, 'low' | 'high' | 'unit'>): string {
  if (low !== null && high !== null)
    return low === high ? limit(low, unit) : `${low} to ${limit(high, unit)}`;
  if (high !== null) return `${limit(high, unit)} or less`;
  return low === null ? 'no limit' : `at least ${limit(low, unit)}`;
}
