import { roleLabels, type Role } from '../../domain/roles';
import { renderMessage, type Message } from './message';
import { oneLine } from './markup';
import { wordedTime } from './worded-time';

interface InvitationFacts {
  readonly labName: string;
  readonly labIsDemo: boolean;
  readonly invitedBy: string;
  readonly role: Role;
  readonly link: string;
  readonly expiresAt: Date;
}

const article = (role: Role): string => (role === 'analyst' ? 'an' : 'a');

/** The message that invites somebody into a lab. */
export function invitationMessage(facts: InvitationFacts): Message {
  const lab = oneLine(facts.labName);
  return renderMessage({
    subject: `${oneLine(facts.invitedBy)} invites you to ${lab} in Headwater`,
    greeting: 'Hello,',
    paragraphs: [
      `${oneLine(facts.invitedBy)} invites you to join ${lab} as ${article(facts.role)} ${roleLabels[facts.role].toLowerCase()}. ` +
        'Headwater is the notebook in which the lab develops its sample-extraction methods.',
      ...(facts.labIsDemo ? ['This lab is a demonstration: its study and its data are invented.'] : [])
    ],
    action: { label: 'Open the invitation', href: facts.link },
    footnotes: [
      `The link works once, until ${wordedTime(facts.expiresAt)}.`,
      'If you do not know this lab, leave the message alone; nothing happens then.'
    ]
  });
}
