import { newId } from '../../src/lib/server/db/entity-id';
import { Analyte } from '../../src/lib/server/db/models/analyte';
import { AnalyteVersion } from '../../src/lib/server/db/models/analyte-version';
import { inTransaction } from '../../src/lib/server/db/transaction';

export interface MadeAnalyte {
  readonly id: string;
  readonly versionId: string;
  readonly name: string;
}

/** An analyte of a lab's library with its first version. */
export async function makeAnalyte(
  labId: string,
  overrides: Readonly<
    Partial<{
      name: string;
      cas: string | null;
      synonyms: readonly string[];
      class: string | null;
      logKow: number;
      smiles: string;
      pkaAcid: readonly number[];
    }>
  > = {}
): Promise<MadeAnalyte> {
  const id = newId();
  const versionId = newId();
  const name = overrides.name ?? `Substance ${id.slice(-6)}`;
  await inTransaction(null, {}, async () => {
    await Analyte.create({ id, labId, currentVersionId: versionId });
    await AnalyteVersion.create({ id: versionId, labId, analyteId: id, version: 1, ...overrides, name });
  });
  return { id, versionId, name };
}
