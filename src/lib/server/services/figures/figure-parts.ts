import { percentText } from '../../../domain/figure-text';
import type { CriterionRule, RecoveryCriteria, RuleType } from '../../../domain/criteria';
import type { RuleView } from '../../../views/findings';
import type { Interval } from '../../stats';

/** Half of a symmetric interval. */
export function halfWidth(ci: Interval | null): number | null {
  return ci === null ? null : (ci.upper - ci.lower) / 2;
}

/** The interval of a method recovery, or null where nothing was detected at all: zeros that scatter by nothing say nothing. */
export function intervalOf(total: {
  readonly ci: Interval | null;
  readonly sd: number | null;
  readonly notDetected: number;
}): Interval | null {
  return total.notDetected > 0 && total.sd === 0 ? null : total.ci;
}

/** "95 %: 8.1 to 16.2" */
export function intervalText(ci: Interval): string {
  return `${Math.round(ci.level * 100)} %: ${percentText(ci.lower)} to ${percentText(ci.upper)}`;
}

/** "70 to 130 %, RSD at most 20 %, n at least 5" */
export function criteriaText(criteria: RecoveryCriteria | null): string {
  if (!criteria) return 'none';
  const rsd = criteria.rsdMax === null ? '' : `, RSD at most ${criteria.rsdMax} %`;
  return `${criteria.low} to ${criteria.high} %${rsd}, n at least ${criteria.nMin}`;
}

const ruleNames: Readonly<Record<RuleType, string>> = {
  'mean recovery': 'Mean recovery',
  'relative standard deviation': 'Relative standard deviation',
  'minimum preparations': 'Preparations',
  'surrogate recovery': 'Surrogate recovery',
  'calibration error': 'Back-calculated calibration level',
  'calibration error at the lowest level': 'Back-calculated lowest level',
  'response factor deviation': 'RSD of the response factors',
  'relative standard error': 'Relative standard error of the line',
  'determination coefficient': 'Coefficient of determination',
  'minimum levels': 'Levels of a line',
  'minimum levels of a curve': 'Levels of a curve of second order',
  'monotone curve': 'Curve runs one way',
  'second-source check': 'Second-source check, of its concentration',
  'continuing check': 'Continuing check, of its concentration',
  'continuing check at the lowest level': 'Continuing check at the lowest level, of its concentration',
  'closing check': 'Last continuing check of a sequence, of its concentration',
  'analytes failing a check': 'Analytes of a check that may fail',
  'time between checks': 'Time between continuing checks',
  'internal standard area': 'Internal standard area, of its mean over the levels',
  'internal standard area against the latest check': 'Internal standard area, of that in the latest check',
  'instrument blank': 'Instrument blank, of the lowest level',
  'duplicate difference': 'Difference of duplicates',
  'individual recovery': 'Individual recovery',
  'first preparation': 'First preparation'
};

export function ruleView(rule: CriterionRule): RuleView {
  const unit = rule.unit === '%' || rule.unit === 'h' ? ` ${rule.unit}` : '';
  const limits =
    rule.low !== null && rule.high !== null
      ? `${rule.low} to ${rule.high}${unit}`
      : rule.low !== null
        ? `at least ${rule.low}${unit}`
        : rule.high !== null
          ? `at most ${rule.high}${unit}`
          : 'no limit';
  return {
    what: ruleNames[rule.type],
    limits,
    citation:
      rule.year !== null && !rule.citation.includes(String(rule.year))
        ? `${rule.citation} (${rule.year})`
        : rule.citation,
    standing: rule.standing,
    note: rule.note
  };
}

/** "7 spiked, 3 unspiked, 2 method blanks" */
export function countsText(replicates: readonly { readonly kind: string }[]): string {
  const counts = new Map<string, number>();
  for (const { kind } of replicates) counts.set(kind, (counts.get(kind) ?? 0) + 1);
  return [...counts].map(([kind, count]) => `${count} ${plural(kind, count)}`).join(', ');
}

function plural(kind: string, count: number): string {
  return count === 1 || kind.endsWith('spiked') ? kind : `${kind}s`;
}

/** "a, b and c" */
export function listed(items: readonly string[]): string {
  return items.length < 2 ? items.join('') : `${items.slice(0, -1).join(', ')} and ${items.at(-1)}`;
}

/** A cause as a person wrote it, without the full stop that would end a sentence twice. */
export function plainEnd(text: string): string {
  return text.trim().replace(/\.+$/, '');
}

/** The first letter as a capital, the end as a full stop. */
export function sentence(text: string): string {
  const plain = plainEnd(text);
  return `${plain.charAt(0).toUpperCase()}${plain.slice(1)}.`;
}
