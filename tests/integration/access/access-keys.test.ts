import { QueryTypes } from 'sequelize';
import { beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../../src/lib/domain/actor';
import type { Role } from '../../../src/lib/domain/roles';
import { AccessKey } from '../../../src/lib/server/db/models/access-key';
import type { Lab } from '../../../src/lib/server/db/models/lab';
import { Membership } from '../../../src/lib/server/db/models/membership';
import { sequelize } from '../../../src/lib/server/db/sequelize';
import { hashToken } from '../../../src/lib/server/auth/tokens';
import { Conflict, Invalid, NotFound } from '../../../src/lib/server/errors';
import {
  holderOfKey,
  listAccessKeys,
  makeAccessKey,
  revokeAccessKey
} from '../../../src/lib/server/services/access-keys';
import { changeRole, removeMember } from '../../../src/lib/server/services/members';
import { makeLab } from '../../factories/lab';
import { makeMember } from '../../factories/member';
import { auditOf } from './people';

let lab: Lab;
let manager: Actor;
let count = 0;
const member = (role: Role = 'chemist'): Promise<Actor> => makeMember({ lab, role });
const keyOf = (actor: Actor, change: Partial<Parameters<typeof makeAccessKey>[1]> = {}) =>
  makeAccessKey(actor, { name: `key ${(count += 1)}`, scopes: ['read'], days: 30, ...change });

beforeAll(async () => {
  lab = await makeLab();
  manager = await member('manager');
});

describe('an access key', () => {
  it('is told once: the database holds its hash and its beginning alone', async () => {
    const chemist = await member();
    const { id, key } = await keyOf(chemist, { name: 'bench computer' });
    expect(key).toMatch(/^hw_[a-z2-9]{8}_[A-Za-z0-9_-]{43}$/);
    const [row] = await sequelize.query<Record<string, unknown>>('SELECT * FROM access_keys WHERE id = $1', {
      bind: [id],
      type: QueryTypes.SELECT
    });
    expect(row).toMatchObject({ prefix: key.slice(0, 11), secret_hash: hashToken(key) });
    const secret = key.slice(12);
    expect(JSON.stringify(row)).not.toContain(secret);
    expect(JSON.stringify(await listAccessKeys(chemist))).not.toContain(secret);
    const [events] = await sequelize.query('SELECT * FROM audit_events WHERE lab_id = $1', {
      bind: [lab.id]
    });
    expect(JSON.stringify(events)).toContain('bench computer');
    expect(JSON.stringify(events)).not.toContain(secret);
  });

  it('acts as its person, with the role that holds at that moment', async () => {
    const chemist = await member();
    const { key } = await keyOf(chemist, { name: 'roles' });
    expect(await holderOfKey(key)).toMatchObject({
      scopes: ['read'],
      actor: { userId: chemist.userId, labId: lab.id, role: 'chemist', accessKey: 'roles' }
    });
    await changeRole(manager, { userId: chemist.userId, role: 'reviewer' });
    expect((await holderOfKey(key))?.actor.role).toBe('reviewer');
  });

  it('ends with the membership, and does not come back with a new one', async () => {
    const chemist = await member();
    const { key } = await keyOf(chemist);
    await removeMember(manager, { userId: chemist.userId });
    expect(await holderOfKey(key)).toBeNull();
    await Membership.create({ labId: lab.id, userId: chemist.userId, role: 'chemist' });
    expect(await holderOfKey(key)).toBeNull();
    expect((await listAccessKeys(chemist)).map(({ state }) => state)).toEqual(['left']);
    expect(await holderOfKey((await keyOf(chemist)).key)).not.toBeNull();
  });

  it('works until it expires or is revoked', async () => {
    const chemist = await member();
    const lasting = await keyOf(chemist, { days: null });
    const short = await keyOf(chemist);
    expect(await holderOfKey(short.key)).not.toBeNull();
    const past = (days: number): Date => new Date(Date.now() - days * 86_400_000);
    // Rows of keys are never changed, so an old one is put in as such.
    const expired = `hw_expired2_${'x'.repeat(43)}`;
    await sequelize.query('UPDATE memberships SET created_at = $2 WHERE user_id = $1', {
      bind: [chemist.userId, past(9)]
    });
    await AccessKey.create({
      labId: lab.id,
      userId: chemist.userId,
      name: 'old',
      prefix: 'hw_expired2',
      secretHash: hashToken(expired),
      scopes: ['read'],
      createdAt: past(2),
      expiresAt: past(1)
    });
    expect(await holderOfKey(expired)).toBeNull();
    await revokeAccessKey(chemist, lasting.id);
    expect(await holderOfKey(lasting.key)).toBeNull();
    expect(await holderOfKey(short.key)).not.toBeNull();
    const states = new Map((await listAccessKeys(chemist)).map(({ name, state }) => [name, state]));
    expect([...states.values()].sort()).toEqual(['expired', 'open', 'revoked']);
    expect(states.get('old')).toBe('expired');
  });

  it('is revoked for good, also by SQL', async () => {
    const chemist = await member();
    const { id } = await keyOf(chemist);
    await revokeAccessKey(chemist, id);
    for (const change of [
      'UPDATE access_keys SET revoked_at = NULL, revoked_by = NULL WHERE id = $1',
      'DELETE FROM access_keys WHERE id = $1'
    ]) {
      await expect(sequelize.query(change, { bind: [id] })).rejects.toThrow(/never changed or deleted/);
    }
    const other = await keyOf(chemist);
    await expect(
      sequelize.query(`UPDATE access_keys SET scopes = '{read,import}' WHERE id = $1`, { bind: [other.id] })
    ).rejects.toThrow(/never changed or deleted/);
  });

  it('notes its use once a minute, not with every request', async () => {
    const { id, key } = await keyOf(await member());
    const used = async (): Promise<Date | null> => (await AccessKey.findByPk(id))?.lastUsedAt ?? null;
    expect(await used()).toBeNull();
    await holderOfKey(key);
    const first = await used();
    expect(first).not.toBeNull();
    await holderOfKey(key);
    expect(await used()).toEqual(first);
    const earlier = new Date(Date.now() - 61_000);
    await AccessKey.update({ lastUsedAt: earlier }, { where: { id } });
    await holderOfKey(key);
    expect((await used())?.getTime()).toBeGreaterThan(earlier.getTime());
  });

  it.each([
    '',
    'hw_',
    'hw_abcdefgh_short',
    `hw_abcdefgh_${'a'.repeat(43)}`,
    `xx_abcdefgh_${'a'.repeat(43)}`,
    '\u0000'
  ])('is no key: %j', async (text) => expect(await holderOfKey(text)).toBeNull());

  it('goes by a name that its person uses once, also when two forms come at the same moment', async () => {
    const chemist = await member();
    const both = await Promise.allSettled([keyOf(chemist, { name: 'Rig' }), keyOf(chemist, { name: 'rig' })]);
    expect(both.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
    const refused = both.find((outcome) => outcome.status === 'rejected');
    expect(refused?.reason).toBeInstanceOf(Invalid);
    expect((refused?.reason as Invalid).problems[0]?.path).toBe('name');
    const [made] = await listAccessKeys(chemist);
    await revokeAccessKey(chemist, made?.id ?? '');
    await keyOf(chemist, { name: 'rig' });
    await keyOf(await member(), { name: 'rig' });
  });

  it('is for bringing data in only where the role does that', async () => {
    const reviewer = await member('reviewer');
    await expect(keyOf(reviewer, { scopes: ['import'] })).rejects.toBeInstanceOf(Invalid);
    await keyOf(reviewer, { scopes: ['read'] });
  });

  it('is not made without end', async () => {
    const analyst = await member('analyst');
    for (let made = 0; made < 20; made += 1) await keyOf(analyst);
    await expect(keyOf(analyst)).rejects.toBeInstanceOf(Conflict);
  });
});

describe('the keys of a lab', () => {
  it('are each person’s own, and a manager sees and revokes any', async () => {
    const chemist = await member();
    const analyst = await member('analyst');
    const { id, key } = await keyOf(analyst, { name: 'analyst’s' });
    expect(await listAccessKeys(chemist)).toEqual([]);
    expect((await listAccessKeys(manager)).find((row) => row.id === id)).toMatchObject({
      owner: analyst.name,
      isOwn: false,
      state: 'open'
    });
    await expect(revokeAccessKey(chemist, id)).rejects.toBeInstanceOf(NotFound);
    expect(await holderOfKey(key)).not.toBeNull();
    await revokeAccessKey(manager, id);
    expect(await holderOfKey(key)).toBeNull();
    expect((await listAccessKeys(analyst))[0]).toMatchObject({ state: 'revoked', revokedBy: manager.name });
    expect((await auditOf(lab.id)).at(-1)).toMatchObject({
      action: 'revoked',
      entity: 'access key',
      actorName: manager.name
    });
  });

  it('are out of reach of another lab’s manager', async () => {
    const { id } = await keyOf(await member());
    const stranger = await makeMember({ role: 'manager' });
    expect(await listAccessKeys(stranger)).toEqual([]);
    await expect(revokeAccessKey(stranger, id)).rejects.toBeInstanceOf(NotFound);
    await expect(revokeAccessKey(stranger, 'no id')).rejects.toBeInstanceOf(NotFound);
  });
});
