import type { MailboxMessageView } from '../../views/people';
import { isLoopbackAddress, isLoopbackHost } from '../auth/loopback';
import { MailboxMessage } from '../db/models/mailbox-message';
import { NotFound } from '../errors';
import { usesLocalMailbox } from '../mail/transport';

/** Where a request to the mailbox comes from. */
interface Caller {
  readonly address: string;
  readonly host: string;
  /** A proxy stands between: then the address is the proxy's and says nothing. */
  readonly isForwarded: boolean;
}

/** Cuts a text where addresses stand in it, so that a page can show them as links. */
export function splitAtLinks(text: string): readonly Readonly<{ text: string; isLink: boolean }>[] {
  return text
    .split(/(https?:\/\/[^\s<>"]+)/)
    .map((part, index) => ({ text: part, isLink: index % 2 === 1 }))
    .filter((part) => part.text !== '');
}

/**
 * The messages that the local mail server took in, newest first. Nobody need be signed in, since who forgot a password
 * is not; so it exists only without a mail server, and only for this machine itself.
 * @throws NotFound otherwise
 */
export async function readMailbox(caller: Caller): Promise<readonly MailboxMessageView[]> {
  const isHere = isLoopbackAddress(caller.address) && isLoopbackHost(caller.host) && !caller.isForwarded;
  if (!usesLocalMailbox() || !isHere) throw new NotFound();
  const rows = await MailboxMessage.findAll({
    order: [
      ['createdAt', 'DESC'],
      ['id', 'DESC']
    ],
    limit: 50
  });
  return rows.map((row) => ({
    id: row.id,
    sender: row.sender,
    recipients: row.recipients,
    subject: row.subject,
    receivedAt: row.createdAt.toISOString(),
    parts: splitAtLinks(row.bodyText)
  }));
}
