import type { Actor } from '../../src/lib/domain/actor';
import type { Role } from '../../src/lib/domain/roles';
import { hashPassword } from '../../src/lib/server/auth/passwords';
import { newId } from '../../src/lib/server/db/entity-id';
import { Analyte } from '../../src/lib/server/db/models/analyte';
import { AnalyteVersion } from '../../src/lib/server/db/models/analyte-version';
import { Lab } from '../../src/lib/server/db/models/lab';
import { Membership } from '../../src/lib/server/db/models/membership';
import { User } from '../../src/lib/server/db/models/user';
import { audit, inTransaction } from '../../src/lib/server/db/transaction';
import { createCriteriaSet } from '../../src/lib/server/services/criteria-sets';
import { demoAccounts } from '../demo-accounts';
import { libraryAnalytes } from '../library/analytes';
import { libraryCriteriaSets } from '../library/criteria-sets';
import type { LibraryAnalyte, Sourced } from '../library/sourced';

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

/** A lab of the demo with its people. */
export interface SeededLab {
  readonly labId: string;
  /** @throws Error where the lab has nobody in that role */
  readonly as: (role: Role) => Actor;
}

/** Creates a demo lab with the people that `demoAccounts` names for it, and its own copy of the library. */
export async function createDemoLab(name: string): Promise<SeededLab> {
  const accounts = demoAccounts.filter(({ lab }) => lab === name);
  const hashes = await Promise.all(accounts.map(({ password }) => hashPassword(password)));
  const actors = await inTransaction(null, {}, async () => {
    const lab = await Lab.create({ name, isDemo: true });
    const made: Actor[] = [];
    for (const [index, { name: person, email, role }] of accounts.entries()) {
      const user = await User.create({ name: person, email, passwordHash: hashes[index] ?? '' });
      await Membership.create({ labId: lab.id, userId: user.id, role });
      made.push({
        userId: user.id,
        name: person,
        email,
        role,
        labId: lab.id,
        labName: name,
        labIsDemo: true
      });
    }
    return made;
  });
  const as = (role: Role): Actor => {
    const actor = actors.find((candidate) => candidate.role === role);
    if (!actor) throw new Error(`${name} has no ${role}`);
    return actor;
  };
  const manager = as('manager');
  await inTransaction(manager, {}, async () => {
    audit({
      action: 'created',
      entity: 'lab',
      entityId: manager.labId,
      sentence: `The demo lab ${name} was made, with invented people and invented data.`,
      after: { name, members: actors.map((actor) => ({ name: actor.name, role: actor.role })) }
    });
    await addToLibrary(manager, libraryAnalytes);
    for (const { name: setName, rules } of libraryCriteriaSets) {
      await createCriteriaSet(manager, { name: setName, rules: [...rules] });
    }
  });
  return { labId: manager.labId, as };
}
