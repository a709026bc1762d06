import type { AccessScope } from '../domain/access-scopes';

/** How a key stands: `left` when its person has left the lab since it was made. Only an open one works. */
export type AccessKeyState = 'open' | 'expired' | 'revoked' | 'left';

/** An access key as lists show it. Times are ISO 8601, UTC. */
export interface AccessKeyView {
  readonly id: string;
  readonly name: string;
  /** How the key begins. */
  readonly prefix: string;
  readonly scopes: readonly AccessScope[];
  readonly owner: string;
  readonly isOwn: boolean;
  readonly state: AccessKeyState;
  readonly createdAt: string;
  /** To the minute; null: never. */
  readonly lastUsedAt: string | null;
  /** null: it does not end by itself. */
  readonly expiresAt: string | null;
  readonly revokedAt: string | null;
  readonly revokedBy: string | null;
}
