import { renderMessage, type Message } from './message';
import { oneLine } from './markup';
import { wordedTime } from './worded-time';

interface ResetFacts {
  readonly name: string;
  readonly link: string;
  readonly expiresAt: Date;
}

/** The message with which a person who forgot the password sets a new one. */
export function passwordResetMessage(facts: ResetFacts): Message {
  return renderMessage({
    subject: 'Set a new password for Headwater',
    greeting: `Hello ${oneLine(facts.name)},`,
    paragraphs: [
      'Somebody, probably you, asked at the sign-in page for a new password for this address. The link opens a page where you set it.'
    ],
    action: { label: 'Set a new password', href: facts.link },
    footnotes: [
      `The link works once, until ${wordedTime(facts.expiresAt)}. Setting a new password signs you out everywhere else.`,
      'If it was not you, leave the message alone: your password stays as it is.'
    ]
  });
}
