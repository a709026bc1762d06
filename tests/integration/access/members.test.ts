import { describe, expect, it } from 'vitest';
import { Membership } from '../../../src/lib/server/db/models/membership';
import { Lab } from '../../../src/lib/server/db/models/lab';
import { verifyChain } from '../../../src/lib/server/db/audit-verify';
import { renameLab } from '../../../src/lib/server/services/labs';
import { changeRole, listMembers, removeMember } from '../../../src/lib/server/services/members';
import { roles } from '../../../src/lib/domain/roles';
import { makeLab } from '../../factories/lab';
import { makeMember } from '../../factories/member';
import { pages } from './pages';
import { auditOf, makePerson, signedIn } from './people';

describe('the role of a member', () => {
  it('changes with their next request', async () => {
    const lab = await makeLab();
    const manager = await makePerson({ lab, role: 'manager', name: 'Greta Weir' });
    const other = await makePerson({ lab, role: 'analyst', name: 'Tom Rill' });
    const theirs = await signedIn(other);
    expect(await pages.whoAmI(theirs)).toMatchObject({ role: 'analyst' });
    const answer = await pages.manage(await signedIn(manager), 'role', {
      userId: other.userId,
      role: 'chemist'
    });
    expect(answer).toMatchObject({ status: 303, location: '/lab/members?after=role' });
    expect(await pages.whoAmI(theirs)).toMatchObject({ role: 'chemist' });
    expect(await auditOf(lab.id)).toEqual([
      {
        action: 'changed',
        entity: 'member',
        sentence: 'Tom Rill is now chemist (before: analyst).',
        actorName: 'Greta Weir'
      }
    ]);
    expect(await verifyChain(lab.id)).toMatchObject({ verified: 1, broken: null });
  });

  it('is the business of a lab manager, at the page and in the service', async () => {
    const lab = await makeLab();
    const other = await makePerson({ lab, role: 'analyst' });
    for (const role of roles.filter((name) => name !== 'manager')) {
      const person = await makePerson({ lab, role });
      const input = { userId: other.userId, role: 'manager' as const };
      const answer = await pages.manage(await signedIn(person), 'role', input);
      expect(answer.status).toBe(403);
      expect(answer.data).toContain('This takes a lab manager.');
      await expect(changeRole(person, input)).rejects.toMatchObject({ status: 403 });
      await expect(removeMember(person, input)).rejects.toMatchObject({ status: 403 });
      await expect(renameLab(person, { name: 'Mine' })).rejects.toMatchObject({ status: 403 });
    }
    expect(await pages.whoAmI(await signedIn(other))).toMatchObject({ role: 'analyst' });
  });

  it('is not to be changed from another lab', async () => {
    const manager = await makePerson({ role: 'manager' });
    const foreign = await makePerson({ role: 'analyst' });
    const browser = await signedIn(manager);
    expect((await pages.manage(browser, 'role', { userId: foreign.userId, role: 'chemist' })).status).toBe(
      404
    );
    expect((await pages.manage(browser, 'remove', { userId: foreign.userId })).status).toBe(404);
    expect(await Membership.count({ where: { userId: foreign.userId, role: 'analyst' } })).toBe(1);
  });
});

describe('a removed member', () => {
  it('is out with the next request, and their record stays', async () => {
    const lab = await makeLab();
    const manager = await makePerson({ lab, role: 'manager' });
    const other = await makePerson({ lab, role: 'chemist', name: 'Ida Rill' });
    const theirs = await signedIn(other);
    expect(await pages.whoAmI(theirs)).not.toBeNull();
    const answer = await pages.manage(await signedIn(manager), 'remove', { userId: other.userId });
    expect(answer).toMatchObject({ status: 303, location: '/lab/members?after=removed' });
    expect(await pages.openStart(theirs)).toMatchObject({ status: 303, location: '/sign-in' });
    expect(theirs.cookies.size).toBe(0);
    expect((await auditOf(lab.id)).at(-1)?.sentence).toBe(
      `Ida Rill (${other.email}) is no longer a member of the lab.`
    );
  });
});

describe('the last manager', () => {
  it('can be neither demoted nor removed, not even by themselves', async () => {
    const manager = await makePerson({ role: 'manager', name: 'Greta Weir' });
    const browser = await signedIn(manager);
    const demoted = await pages.manage(browser, 'role', { userId: manager.userId, role: 'chemist' });
    const removed = await pages.manage(browser, 'remove', { userId: manager.userId });
    for (const answer of [demoted, removed]) {
      expect(answer.status).toBe(409);
      expect(answer.data).toMatchObject({
        data: { message: 'Greta Weir is the only lab manager. Make somebody else a manager first.' }
      });
    }
    expect(await pages.whoAmI(browser)).toMatchObject({ role: 'manager' });
    expect(await auditOf(manager.labId)).toEqual([]);
  });

  it('stays even when two managers demote each other at the same moment', async () => {
    const lab = await makeLab();
    const [one, two] = [
      await makeMember({ lab, role: 'manager' }),
      await makeMember({ lab, role: 'manager' })
    ];
    const results = await Promise.allSettled([
      changeRole(one, { userId: two.userId, role: 'analyst' }),
      changeRole(two, { userId: one.userId, role: 'analyst' })
    ]);
    expect(results.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
    expect(await Membership.count({ where: { labId: lab.id, role: 'manager' } })).toBe(1);
  });
});

describe('the page of members', () => {
  it('shows everybody in the lab to each of them, and nobody else', async () => {
    const lab = await makeLab();
    const manager = await makePerson({ lab, role: 'manager', name: 'B' });
    const analyst = await makePerson({ lab, role: 'analyst', name: 'A' });
    await makePerson({ name: 'From elsewhere' });
    const { data } = await pages.members(await signedIn(analyst));
    expect(data).toMatchObject({
      canManage: false,
      invitations: [],
      members: [{ name: 'A' }, { name: 'B' }]
    });
    expect(await listMembers(manager)).toHaveLength(2);
  });
});

describe('names', () => {
  it('of a person are theirs to change, and every lab of theirs notes it', async () => {
    const person = await makePerson({ name: 'Ida Rill' });
    const second = await makeLab();
    await Membership.create({ labId: second.id, userId: person.userId, role: 'analyst' });
    const browser = await signedIn(person);
    expect((await pages.account(browser, 'name', { name: '  Ida Weir ' })).status).toBe(303);
    expect(await pages.whoAmI(browser)).toMatchObject({ name: 'Ida Weir' });
    for (const labId of [person.labId, second.id]) {
      expect((await auditOf(labId)).at(-1)?.sentence).toBe('Ida Rill is now called Ida Weir.');
    }
    const empty = await pages.account(browser, 'name', { name: ' ' });
    expect(empty.data).toMatchObject({ data: { errors: { name: expect.stringContaining('Enter a name') } } });
  });

  it('of the lab are the manager’s', async () => {
    const manager = await makeMember({ role: 'manager' });
    await renameLab(manager, { name: 'Upper Weir Laboratory' });
    expect((await Lab.findByPk(manager.labId))?.name).toBe('Upper Weir Laboratory');
    expect((await auditOf(manager.labId)).at(-1)?.sentence).toContain('Upper Weir Laboratory');
  });
});
