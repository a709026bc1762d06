import type { Role } from '../domain/roles';

/** A lab that a person can work in. */
export interface LabChoice {
  readonly id: string;
  readonly name: string;
  readonly isDemo: boolean;
  readonly role: Role;
}

/** A member as the list of members shows them. Times are ISO 8601, UTC. */
export interface MemberView {
  readonly userId: string;
  readonly name: string;
  readonly email: string;
  readonly role: Role;
  readonly since: string;
}

export interface InvitationView {
  readonly id: string;
  readonly email: string;
  readonly role: Role;
  readonly invitedBy: string;
  readonly invitedAt: string;
  readonly expiresAt: string;
  readonly isExpired: boolean;
}

/** What the holder of an invitation's link sees. */
export type InvitationState =
  | {
      readonly state: 'open';
      readonly email: string;
      readonly role: Role;
      readonly labName: string;
      readonly labIsDemo: boolean;
      readonly invitedBy: string;
      readonly expiresAt: string;
      /** The address already has an account: its password is asked for instead of a new one. */
      readonly hasAccount: boolean;
    }
  | { readonly state: 'accepted' | 'revoked' | 'expired'; readonly labName: string };

/** What the holder of a reset link sees. */
export type ResetState =
  | { readonly state: 'open'; readonly email: string; readonly name: string; readonly expiresAt: string }
  | { readonly state: 'used' | 'expired' };

/** A message in the local mailbox. */
export interface MailboxMessageView {
  readonly id: string;
  readonly sender: string;
  readonly recipients: string;
  readonly subject: string;
  readonly receivedAt: string;
  /** The text in parts, so that addresses can be shown as links. */
  readonly parts: readonly Readonly<{ text: string; isLink: boolean }>[];
}
