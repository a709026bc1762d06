import { Variant } from '../../src/lib/server/db/models/variant';
import type { Study } from '../../src/lib/server/db/models/study';

/** A variant without steps. */
export async function makeVariant(
  study: Study,
  overrides: Readonly<Partial<{ code: string; name: string }>> = {}
): Promise<Variant> {
  const count = await Variant.count({ where: { studyId: study.id } });
  const code = overrides.code ?? String.fromCharCode(65 + count);
  return Variant.create({
    labId: study.labId,
    studyId: study.id,
    code,
    name: overrides.name ?? `Variant ${code}`,
    position: count + 1
  });
}
