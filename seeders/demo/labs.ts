import type { Actor } from '../../src/lib/domain/actor';
import type { Role } from '../../src/lib/domain/roles';
import { hashPassword } from '../../src/lib/server/auth/passwords';
import { Lab } from '../../src/lib/server/db/models/lab';
import { Membership } from '../../src/lib/server/db/models/membership';
import { User } from '../../src/lib/server/db/models/user';
import { audit, inTransaction } from '../../src/lib/server/db/transaction';
import { demoAccounts } from '../demo-accounts';
import { stockLibrary } from '../library/stock-library';

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
    await stockLibrary(manager);
  });
  return { labId: manager.labId, as };
}
