import type { Actor } from '../../src/lib/domain/actor';
import { newId } from '../../src/lib/server/db/entity-id';
import { Analyte } from '../../src/lib/server/db/models/analyte';
import { AnalyteVersion } from '../../src/lib/server/db/models/analyte-version';
import { audit, inTransaction } from '../../src/lib/server/db/transaction';
import { createCriteriaSet } from '../../src/lib/server/services/criteria-sets';
import { libraryAnalytes } from './analytes';
import { libraryCriteriaSets } from './criteria-sets';
import type { LibraryAnalyte, Sourced } from './sourced';

const sourcedProperties = [
  'logKow',
  'pkaAcid',
  'pkaBase',
  'boilingPointC',
  'vapourPressurePa',
  'henryPaM3Mol',
  'waterSolubilityMgL'
] as const satisfies readonly (keyof LibraryAnalyte)[];

/** The row of a library analyte's first version: its values, and beside them where each was taken from. */
function versionOf(analyte: LibraryAnalyte) {
  const sources = Object.fromEntries(
    sourcedProperties.flatMap((name) => {
      const property: Sourced<unknown> | undefined = analyte[name];
      return property ? [[name, property.source]] : [];
    })
  );
  return {
    name: analyte.name,
    synonyms: analyte.synonyms,
    cas: analyte.cas,
    smiles: analyte.smiles,
    formula: analyte.formula,
    molarMass: analyte.molarMass,
    logKow: analyte.logKow?.value ?? null,
    pkaAcid: analyte.pkaAcid?.value ?? [],
    pkaBase: analyte.pkaBase?.value ?? [],
    boilingPointC: analyte.boilingPointC?.value ?? null,
    vapourPressurePa: analyte.vapourPressurePa?.value ?? null,
    henryPaM3Mol: analyte.henryPaM3Mol?.value ?? null,
    waterSolubilityMgL: analyte.waterSolubilityMgL?.value ?? null,
    class: analyte.class,
    sources: analyte.molarMass === null ? sources : { ...sources, molarMass: 'computed from the structure' },
    note: analyte.note ?? null
  };
}

/** Puts analytes into a lab's library, each as a lasting entry with its first version. */
export async function addToLibrary(actor: Actor, analytes: readonly LibraryAnalyte[]): Promise<void> {
  await inTransaction(actor, {}, async () => {
    const ids = analytes.map((analyte) => ({ id: newId(), versionId: newId(), analyte }));
    const { labId } = actor;
    // The current version's foreign key is checked at the commit, so the two go in one after the other.
    await Analyte.bulkCreate(ids.map(({ id, versionId }) => ({ id, labId, currentVersionId: versionId })));
    await AnalyteVersion.bulkCreate(
      ids.map(({ id, versionId, analyte }) => ({
        id: versionId,
        labId,
        analyteId: id,
        version: 1,
        createdBy: actor.userId,
        ...versionOf(analyte)
      }))
    );
    audit({
      action: 'created',
      entity: 'library',
      sentence: `${analytes.length} analytes came into the library.`,
      after: { analytes: analytes.map(({ name }) => name) }
    });
  });
}

/** Gives a new lab its own copy of the library: analytes and criteria sets, each with its sources. */
export async function stockLibrary(manager: Actor): Promise<void> {
  await inTransaction(manager, {}, async () => {
    await addToLibrary(manager, libraryAnalytes);
    for (const { name, rules } of libraryCriteriaSets) {
      await createCriteriaSet(manager, { name, rules: [...rules] });
    }
  });
}
