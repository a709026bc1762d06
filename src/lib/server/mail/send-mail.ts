import { config } from '../config';
import { OutboxMessage } from '../db/models/outbox-message';
import { logger } from '../logger';
import { mailTransport } from './transport';

/** Who the messages come from. With a server of one's own, the account that SMTP_URL names when it is an address. */
export function senderAddress(smtpUrl: string | null): string {
  const account = smtpUrl === null ? '' : decodeURIComponent(new URL(smtpUrl).username);
  if (account.includes('@')) return account;
  const host = smtpUrl === null ? 'localhost' : new URL(smtpUrl).hostname;
  return `headwater@${host}`;
}

/**
 * Sends one message of the outbox, once: a message that has left is passed over.
 * @throws whatever the mail server answers; the queue then tries again later
 */
export async function sendMail(messageId: string): Promise<void> {
  const message = await OutboxMessage.findByPk(messageId);
  if (message === null || message.sentAt !== null) return;
  const transport = await mailTransport();
  await transport.sendMail({
    from: { name: 'Headwater', address: senderAddress(config().smtpUrl) },
    to: { name: '', address: message.recipient },
    subject: message.subject,
    text: message.bodyText,
    html: message.bodyHtml,
    headers: { 'Auto-Submitted': 'auto-generated' },
    // A retry carries the same id, so that a mail program shows one message.
    messageId: `<${message.id}@headwater>`
  });
  await message.update({ sentAt: new Date(), bodyText: '', bodyHtml: '' });
  logger.info({ messageId, template: message.template }, 'message sent');
}
