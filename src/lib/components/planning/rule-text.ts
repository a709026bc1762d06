import type { CriterionRule } from '$lib/domain/criteria';

const standings: Readonly<Record<CriterionRule['standing'], string>> = {
  seen: 'read in the document',
  memory: 'from memory: verify before use',
  own: 'set by the lab'
};

/** How well a rule's citation is known. */
export function standingText({ standing }: Pick<CriterionRule, 'standing'>): string {
  return standings[standing];
}
