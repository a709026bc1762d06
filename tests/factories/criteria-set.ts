import type { CriterionRule, WrittenRule } from '../../src/lib/domain/criteria';
import { newId } from '../../src/lib/server/db/entity-id';
import { CriteriaSet } from '../../src/lib/server/db/models/criteria-set';
import { CriteriaSetVersion } from '../../src/lib/server/db/models/criteria-set-version';
import { inTransaction } from '../../src/lib/server/db/transaction';

/** A rule that the lab set for itself. */
export function makeRule(overrides: Readonly<Partial<WrittenRule>> = {}): WrittenRule {
  return {
    type: 'mean recovery',
    low: 70,
    high: 130,
    unit: '%',
    citation: "the lab's own",
    year: null,
    standing: 'own',
    note: null,
    ...overrides
  };
}

const usual: readonly CriterionRule[] = [
  makeRule(),
  makeRule({ type: 'relative standard deviation', low: null, high: 20 }),
  makeRule({ type: 'minimum preparations', low: 5, high: null, unit: 'count' })
];

/** A set of acceptance criteria with its first version: mean 70 to 130 %, RSD 20 %, five preparations. */
export async function makeCriteriaSet(
  labId: string,
  overrides: Readonly<Partial<{ name: string; rules: readonly CriterionRule[] }>> = {}
): Promise<{ readonly id: string; readonly versionId: string }> {
  const id = newId();
  const versionId = newId();
  await inTransaction(null, {}, async () => {
    await CriteriaSet.create({ id, labId, currentVersionId: versionId });
    await CriteriaSetVersion.create({
      id: versionId,
      labId,
      criteriaSetId: id,
      version: 1,
      name: overrides.name ?? 'Bench criteria',
      rules: overrides.rules ?? usual
    });
  });
  return { id, versionId };
}
