import type { Transaction } from 'sequelize';
import { OutboxMessage } from '../db/models/outbox-message';
import { enqueue } from '../jobs/queue';
import { sendMailJob } from './mail-jobs';
import type { Message } from './message';

/** A rendered message and where it goes. */
export interface Outgoing {
  readonly template: OutboxMessage['template'];
  /** The lab it is about; null for what concerns a person alone. */
  readonly labId: string | null;
  readonly recipient: string;
  readonly message: Message;
}

/** Puts a message into the outbox and its sending into the queue, both within the transaction: a rollback sends nothing. */
export async function enqueueMail(transaction: Transaction, outgoing: Outgoing): Promise<void> {
  const row = await OutboxMessage.create(
    {
      template: outgoing.template,
      labId: outgoing.labId,
      recipient: outgoing.recipient,
      subject: outgoing.message.subject,
      bodyText: outgoing.message.text,
      bodyHtml: outgoing.message.html
    },
    { transaction }
  );
  await enqueue(transaction, sendMailJob, { messageId: row.id });
}
