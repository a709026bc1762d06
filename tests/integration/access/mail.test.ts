import { afterEach, describe, expect, it, vi } from 'vitest';
import { QueryTypes } from 'sequelize';
import { jobs } from '../../../src/lib/server/jobs/definitions';
import { handlers } from '../../../src/lib/server/jobs/handlers';
import { startWorker, type Worker } from '../../../src/lib/server/jobs/worker';
import { MailboxMessage } from '../../../src/lib/server/db/models/mailbox-message';
import { OutboxMessage } from '../../../src/lib/server/db/models/outbox-message';
import { sequelize } from '../../../src/lib/server/db/sequelize';
import { inTransaction } from '../../../src/lib/server/db/transaction';
import { enqueueMail } from '../../../src/lib/server/mail/enqueue-mail';
import { keepMessage } from '../../../src/lib/server/mail/local-server';
import { renderMessage } from '../../../src/lib/server/mail/message';
import { sendMail } from '../../../src/lib/server/mail/send-mail';
import { readMailbox } from '../../../src/lib/server/services/mailbox';
import { TestBrowser } from './browser';
import { pages } from './pages';
import { makePerson } from './people';

const here = { address: '127.0.0.1', host: 'localhost', isForwarded: false };

const message = renderMessage({
  subject: 'Größe der Probe: 5 µL',
  greeting: 'Hello,',
  paragraphs: [
    'A line that is long enough to be folded by any program that folds lines at some seventy characters.'
  ],
  action: {
    label: 'Open',
    href: 'http://localhost:3000/invitations/aaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaa'
  },
  footnotes: []
});

const outgoing = (recipient: string) => ({
  template: 'invitation' as const,
  labId: null,
  recipient,
  message
});

async function queued(recipient: string): Promise<string> {
  await inTransaction(null, {}, (transaction) => enqueueMail(transaction, outgoing(recipient)));
  const row = await OutboxMessage.findOne({ where: { recipient } });
  return row!.id;
}

describe('a message', () => {
  it('goes over SMTP to the local mailbox, whole, with its link and its letters', async () => {
    await sendMail(await queued('whole@lab.test'));
    const [received] = await readMailbox(here);
    expect(received).toMatchObject({ recipients: 'whole@lab.test', subject: 'Größe der Probe: 5 µL' });
    expect(received?.parts.find(({ isLink }) => isLink)?.text).toBe(
      'http://localhost:3000/invitations/aaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaa'
    );
    expect(received?.parts.map(({ text }) => text).join('')).toContain('some seventy characters.');
  });

  it('is emptied in the outbox once it has left, and leaves once', async () => {
    const id = await queued('once@lab.test');
    await sendMail(id);
    await sendMail(id);
    const row = await OutboxMessage.findByPk(id);
    expect(row).toMatchObject({ bodyText: '', bodyHtml: '' });
    expect(row?.sentAt).toBeInstanceOf(Date);
    expect(await MailboxMessage.count({ where: { recipients: 'once@lab.test' } })).toBe(1);
  });

  it('is neither kept nor sent when the transaction comes to nothing', async () => {
    const count = async () =>
      Number(
        (
          await sequelize.query<{ n: string }>(
            "SELECT count(*) AS n FROM job_queue.job WHERE name = 'mail.send'",
            {
              type: QueryTypes.SELECT
            }
          )
        )[0]?.n
      );
    const before = await count();
    const work = inTransaction(null, {}, async (transaction) => {
      await enqueueMail(transaction, outgoing('rolled-back@lab.test'));
      expect(await count()).toBe(before + 1);
      throw new Error('changed my mind');
    });
    await expect(work).rejects.toThrow('changed my mind');
    expect(await count()).toBe(before);
    expect(await OutboxMessage.count({ where: { recipient: 'rolled-back@lab.test' } })).toBe(0);
  });
});

describe('the mailbox', () => {
  it('keeps the newest two hundred', async () => {
    for (let i = 0; i < 205; i += 1) {
      await keepMessage(`From: a@lab.test\r\nTo: many@lab.test\r\nSubject: ${i}\r\n\r\nText ${i}\r\n`);
    }
    expect(await MailboxMessage.count()).toBe(200);
    expect((await readMailbox(here))[0]?.subject).toBe('204');
  });

  it.each([
    ['another machine', { ...here, address: '10.0.0.7' }],
    ['a foreign name for this one', { ...here, host: 'rebound.elsewhere.test' }],
    ['behind a proxy', { ...here, isForwarded: true }]
  ])('is not there for %s', async (_what, caller) => {
    await expect(readMailbox(caller)).rejects.toMatchObject({ status: 404 });
  });
});

describe('the worker', () => {
  let worker: Worker | null = null;
  afterEach(async () => {
    await worker?.stop();
    worker = null;
  });

  it('carries a forgotten password from the form to the mailbox', async () => {
    worker = await startWorker(process.env.DATABASE_URL!, jobs, handlers, 0.5);
    const person = await makePerson();
    await pages.forgot(new TestBrowser(), person.email);
    await vi.waitFor(
      async () => expect(await MailboxMessage.count({ where: { recipients: person.email } })).toBe(1),
      { timeout: 30_000, interval: 200 }
    );
    const row = await MailboxMessage.findOne({ where: { recipients: person.email } });
    const secret = /\/reset-password\/(\S+)/.exec(row?.bodyText ?? '')?.[1] ?? '';
    expect((await pages.openReset(new TestBrowser(), secret)).data).toMatchObject({
      reset: { email: person.email }
    });
  });
});
