import { simpleParser, type AddressObject } from 'mailparser';
import { SMTPServer } from 'smtp-server';
import { MailboxMessage } from '../db/models/mailbox-message';
import { sequelize } from '../db/sequelize';
import { onShutdown } from '../shutdown';

/** The mailbox forgets all but its newest messages: it is for trying things, not for keeping. */
const kept = 200;
const sizeLimit = 1024 * 1024;

const addresses = (field: AddressObject | AddressObject[] | undefined): string =>
  (field === undefined ? [] : Array.isArray(field) ? field : [field]).map((part) => part.text).join(', ');

/** Stores a message as it arrived, and lets go of the oldest. */
export async function keepMessage(source: NodeJS.ReadableStream | Buffer | string): Promise<void> {
  const parsed = await simpleParser(source as Parameters<typeof simpleParser>[0]);
  await MailboxMessage.create({
    sender: addresses(parsed.from),
    recipients: addresses(parsed.to),
    subject: parsed.subject ?? '',
    bodyText: parsed.text ?? ''
  });
  await sequelize.query(
    'DELETE FROM mailbox_messages WHERE id NOT IN (SELECT id FROM mailbox_messages ORDER BY created_at DESC, id DESC LIMIT $1)',
    { bind: [kept] }
  );
}

/**
 * A mail server of our own on a free port of the loopback address. It takes every message and delivers none:
 * they are read on the mailbox page. Closes with the process.
 * @returns its port
 */
export async function startLocalServer(): Promise<number> {
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['AUTH', 'STARTTLS'],
    disableReverseLookup: true,
    size: sizeLimit,
    onData(stream, _session, done) {
      keepMessage(stream).then(() => done(), done);
    }
  });
  await new Promise<void>((resolve, reject) => {
    server.once('error', reject);
    server.listen(0, '127.0.0.1', resolve);
  });
  const address = server.server.address();
  if (address === null || typeof address === 'string') throw new Error('the local mail server has no port');
  // A client that hangs up in the middle is no reason to end the process.
  server.on('error', () => undefined);
  onShutdown('work', 'local mail server', () => new Promise<void>((resolve) => server.close(resolve)));
  return address.port;
}
