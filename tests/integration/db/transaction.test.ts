import { expect, test, vi } from 'vitest';
import { verifyChain } from '../../../src/lib/server/db/audit-verify';
import { AuditEvent } from '../../../src/lib/server/db/models/audit-event';
import { Lab } from '../../../src/lib/server/db/models/lab';
import { Study } from '../../../src/lib/server/db/models/study';
import { Variant } from '../../../src/lib/server/db/models/variant';
import { sequelize } from '../../../src/lib/server/db/sequelize';
import { inSnapshot } from '../../../src/lib/server/db/snapshot';
import { audit, inTransaction, transactionClient } from '../../../src/lib/server/db/transaction';
import { Conflict, NotFound } from '../../../src/lib/server/errors';
import { makeLab } from '../../factories/lab';
import { makeMember } from '../../factories/member';
import { makeStudy, setStudyState } from '../../factories/study';

const entry = (sentence: string, extra: object = {}) => ({
  action: 'changed',
  entity: 'study',
  sentence,
  ...extra
});

async function makeVariant(study: Study, code: string): Promise<Variant> {
  return Variant.create({
    labId: study.labId,
    studyId: study.id,
    code,
    name: `Variant ${code}`,
    position: 1
  });
}

test('what throws leaves neither rows nor audit events nor a raised data version', async () => {
  const actor = await makeMember();
  const { study } = await makeStudy(actor);
  const failing = inTransaction(actor, { study: study.id }, async () => {
    await makeVariant(study, 'A');
    audit(entry('Added variant A.'));
    throw new Error('the disk is full');
  });
  await expect(failing).rejects.toThrow('the disk is full');
  expect(await Variant.count({ where: { studyId: study.id } })).toBe(0);
  expect(await AuditEvent.count({ where: { labId: actor.labId } })).toBe(0);
  expect((await study.reload()).dataVersion).toBe('1');
});

test('a transaction inside another joins it, and the data version rises once', async () => {
  const actor = await makeMember();
  const { study } = await makeStudy(actor);
  await inTransaction(actor, { study: study.id }, async (outer) => {
    audit(entry('First.'));
    await inTransaction(actor, { study: study.id }, async (inner) => {
      expect(inner).toBe(outer);
      await makeVariant(study, 'A');
      audit(entry('Second.'));
    });
    expect(await Variant.count({ where: { studyId: study.id } })).toBe(1);
  });
  expect((await study.reload()).dataVersion).toBe('2');
  const events = await AuditEvent.findAll({ where: { labId: actor.labId }, order: [['seq', 'ASC']] });
  expect(events.map((event) => event.sentence)).toEqual(['First.', 'Second.']);
});

test('an inner failure that is not caught takes the outer work back too', async () => {
  const actor = await makeMember();
  const { study } = await makeStudy(actor);
  const failing = inTransaction(actor, { study: study.id }, async () => {
    await makeVariant(study, 'A');
    await inTransaction(actor, {}, async () => Promise.reject(new Error('no')));
  });
  await expect(failing).rejects.toThrow('no');
  expect(await Variant.count({ where: { studyId: study.id } })).toBe(0);
});

test('a study of another lab is not found, and one in review is a conflict', async () => {
  const actor = await makeMember();
  const stranger = await makeMember();
  const { study } = await makeStudy(actor);
  const work = vi.fn(async () => undefined);
  await expect(inTransaction(stranger, { study: study.id }, work)).rejects.toBeInstanceOf(NotFound);
  await setStudyState(study.id, 'in review');
  await expect(inTransaction(actor, { study: study.id }, work)).rejects.toBeInstanceOf(Conflict);
  expect(work).not.toHaveBeenCalled();
});

test('a study submitted while somebody still writes refuses the writer at the end', async () => {
  const actor = await makeMember();
  const { study } = await makeStudy(actor);
  const writing = inTransaction(actor, { study: study.id }, async () => {
    audit(entry('Added nothing.'));
    // Another connection, as another request would use.
    await fromOutside(`UPDATE studies SET state = 'in review' WHERE id = '${study.id}'`);
  });
  await expect(writing).rejects.toThrow(/in review/);
  expect(await AuditEvent.count({ where: { labId: actor.labId } })).toBe(0);
});

test('transactions side by side give every event of a lab its own place in one unbroken chain', async () => {
  const actor = await makeMember();
  const { study } = await makeStudy(actor);
  await Promise.all(
    Array.from({ length: 12 }, (_, index) =>
      inTransaction(actor, { study: study.id }, async () => {
        audit(
          entry(`Event ${index} a.`, {
            before: { at: index },
            after: { values: [0.1, 1e-7, -0, 12345678901234] }
          })
        );
        audit(entry(`Event ${index} b.`));
      })
    )
  );
  const report = await verifyChain(actor.labId);
  expect(report).toMatchObject({ verified: 24, broken: null });
  expect((await study.reload()).dataVersion).toBe('13');
});

test('odd characters and numbers hash the same after they were stored', async () => {
  const actor = await makeMember();
  await inTransaction(actor, {}, async () => {
    audit(
      entry('Zero \u0000, half a pair \ud800, µ, 漢, "quotes" and \\.', {
        before: { key: 'a\u0000b', missing: undefined, when: new Date(0), big: 10n ** 20n },
        after: [1.7976931348623157e308, 5e-324, 0.1 + 0.2, null],
        reason: 'a\ud800'
      })
    );
  });
  expect(await verifyChain(actor.labId)).toMatchObject({ verified: 1, broken: null });
});

test('a changed, a removed and a re-linked event are found and named', async () => {
  const actor = await makeMember();
  const write = (sentence: string) => inTransaction(actor, {}, async () => audit(entry(sentence)));
  for (const sentence of ['One.', 'Two.', 'Three.', 'Four.']) await write(sentence);

  const where = `lab_id = '${actor.labId}'`;
  await tamper(`UPDATE audit_events SET sentence = 'Two!' WHERE ${where} AND seq = 2`);
  expect((await verifyChain(actor.labId)).broken).toMatchObject({ seq: 2, fault: 'hash' });
  await tamper(`UPDATE audit_events SET sentence = 'Two.' WHERE ${where} AND seq = 2`);
  expect((await verifyChain(actor.labId)).broken).toBeNull();

  await tamper(`UPDATE audit_events SET previous_hash = repeat('a', 64) WHERE ${where} AND seq = 3`);
  expect((await verifyChain(actor.labId)).broken).toMatchObject({ seq: 3, fault: 'previous hash' });
  await tamper(`DELETE FROM audit_events WHERE ${where} AND seq = 3`);
  expect((await verifyChain(actor.labId)).broken).toMatchObject({ seq: 3, fault: 'missing event' });
});

test('the database refuses to change or delete an audit event', async () => {
  const actor = await makeMember();
  await inTransaction(actor, {}, async () => audit(entry('Stays.')));
  const where = `WHERE lab_id = '${actor.labId}'`;
  await expect(sequelize.query(`UPDATE audit_events SET sentence = 'Gone.' ${where}`)).rejects.toThrow(
    /never changed/
  );
  await expect(sequelize.query(`DELETE FROM audit_events ${where}`)).rejects.toThrow(/never changed/);
  await expect(sequelize.query('TRUNCATE audit_events')).rejects.toThrow(/never changed/);
});

test('a snapshot does not see what is stored after it began, and refuses to write', async () => {
  const lab = await makeLab({ name: 'Before' });
  await inSnapshot(async () => {
    expect((await Lab.findByPk(lab.id))?.name).toBe('Before');
    await fromOutside(`UPDATE labs SET name = 'After' WHERE id = '${lab.id}'`);
    expect((await Lab.findByPk(lab.id))?.name).toBe('Before');
    expect(await inSnapshot(async () => (await Lab.findByPk(lab.id))?.name)).toBe('Before');
  });
  expect((await Lab.findByPk(lab.id))?.name).toBe('After');
  await expect(inSnapshot(() => makeLab())).rejects.toThrow(/read-only/);
});

test('an audit event outside of a transaction, or without a lab, is a mistake that shows', async () => {
  expect(() => audit(entry('Nowhere.'))).toThrow(/inside inTransaction/);
  await expect(inTransaction(null, {}, async () => audit(entry('No lab.')))).rejects.toThrow(
    /needs a writer/
  );
  expect(() => transactionClient()).toThrow(/running transaction/);
});

test('work without a lab can write events in the names of several', async () => {
  const first = await makeMember();
  const second = await makeMember();
  await inTransaction(null, {}, async () => {
    for (const writer of [second, first])
      await inTransaction(writer, {}, async () => audit(entry('Password changed.')));
  });
  expect(await verifyChain(first.labId)).toMatchObject({ verified: 1, broken: null });
  expect(await verifyChain(second.labId)).toMatchObject({ verified: 1, broken: null });
});

/** Runs a statement on a connection outside of the running transaction. */
async function fromOutside(sql: string): Promise<void> {
  await sequelize.query(sql, { transaction: null });
}

/** What somebody with the database's own rights could do. */
async function tamper(sql: string): Promise<void> {
  await sequelize.query(
    `ALTER TABLE audit_events DISABLE TRIGGER USER; ${sql}; ALTER TABLE audit_events ENABLE TRIGGER USER`
  );
}
