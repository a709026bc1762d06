import type { CriterionRule, RecoveryCriteria } from '../../../domain/criteria';
import type { RecoveryBand } from '../../../domain/recovery-band';
import type { StudyData, StudyExperiment, StudyPanelEntry } from './study-data';

/** What one analyte is held against, and where that comes from. */
export interface AppliedCriteria {
  readonly criteria: RecoveryCriteria | null;
  /** The rules used, each with its citation; empty where the analyte has criteria of its own. */
  readonly rules: readonly CriterionRule[];
  /** Why this analyte has criteria of its own; null: it has the study's. */
  readonly overrideReason: string | null;
}

/** The study's criteria for mean recovery, RSD and preparations, or null when it has no rule for mean recovery. */
export function studyCriteria(rules: readonly CriterionRule[]): RecoveryCriteria | null {
  const mean = ruleOf(rules, 'mean recovery');
  if (!mean) return null;
  const rsd = ruleOf(rules, 'relative standard deviation');
  const preparations = ruleOf(rules, 'minimum preparations');
  return {
    low: mean.low ?? 0,
    // A rule without an upper end: no recovery reaches this.
    high: mean.high ?? 1000,
    rsdMax: rsd?.high ?? null,
    nMin: preparations?.low ?? preparations?.high ?? 1
  };
}

/** The study's limits of mean recovery as they are written, or null when it has no such rule. */
export function recoveryBand(rules: readonly CriterionRule[]): RecoveryBand | null {
  const mean = ruleOf(rules, 'mean recovery');
  return mean && { low: mean.low, high: mean.high };
}

/** The numbers that figures are held against. */
export function limitsOf(criteria: RecoveryCriteria | null): {
  readonly mean: readonly number[];
  readonly rsd: readonly number[];
} {
  if (!criteria) return { mean: [], rsd: [] };
  const { low, high, rsdMax } = criteria;
  return { mean: [low, high], rsd: rsdMax === null ? [] : [rsdMax] };
}

export function ruleOf(rules: readonly CriterionRule[], type: CriterionRule['type']): CriterionRule | null {
  return rules.find((rule) => rule.type === type) ?? null;
}

/**
 * True for an experiment that was spiked in the sample. It alone shows what the whole method recovers, and that is what the
 * criteria are for: an experiment further down has left part of the procedure out.
 */
export function showsWholeMethod(data: StudyData, experiment: StudyExperiment): boolean {
  const farthest = data.stages.findLast((stage) => stage.kind === 'loss');
  return experiment.stageKey === farthest?.key;
}

/** The criteria of one panel entry: its own where it has some, else the study's. */
export function criteriaFor(data: StudyData, entry: StudyPanelEntry): AppliedCriteria {
  if (entry.criteriaOverride) {
    const { reason, ...criteria } = entry.criteriaOverride;
    return { criteria, rules: [], overrideReason: reason ?? 'set for this analyte' };
  }
  const types: readonly CriterionRule['type'][] = [
    'mean recovery',
    'relative standard deviation',
    'minimum preparations'
  ];
  const { rules } = data.criteriaSet;
  return {
    criteria: studyCriteria(rules),
    rules: types.map((type) => ruleOf(rules, type)).filter((rule) => rule !== null),
    overrideReason: null
  };
}
