import { randomBytes } from 'node:crypto';
import type { Actor } from '../../src/lib/domain/actor';
import type { Role } from '../../src/lib/domain/roles';
import { Membership } from '../../src/lib/server/db/models/membership';
import { User } from '../../src/lib/server/db/models/user';
import type { Lab } from '../../src/lib/server/db/models/lab';
import { makeLab } from './lab';

/** A person with a role in a lab (a new one where none is given), as the request hook would hand them to a service. */
export async function makeMember(
  overrides: Readonly<
    Partial<{ lab: Lab; role: Role; name: string; email: string; passwordHash: string }>
  > = {}
): Promise<Actor> {
  const lab = overrides.lab ?? (await makeLab());
  const role = overrides.role ?? 'chemist';
  const user = await User.create({
    name: overrides.name ?? `Test ${role}`,
    email: overrides.email ?? `${role}-${randomBytes(4).toString('hex')}@lab.test`,
    passwordHash: overrides.passwordHash ?? 'no password opens this'
  });
  await Membership.create({ labId: lab.id, userId: user.id, role });
  return {
    userId: user.id,
    name: user.name,
    email: user.email,
    role,
    labId: lab.id,
    labName: lab.name,
    labIsDemo: lab.isDemo
  };
}
