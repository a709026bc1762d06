import type { AccessScope } from '$lib/domain/access-scopes';
import type { Actor } from '$lib/domain/actor';
import type { Problem } from '$lib/server/errors';

declare global {
  namespace App {
    interface Locals {
      /** Set by the request hook: correlates log lines and error pages. */
      requestId: string;
      /** The signed-in member of the active lab; null for a stranger. */
      actor: Actor | null;
      /** What the access key may do that the request came with; null in a session, and for a stranger. */
      keyScopes: readonly AccessScope[] | null;
    }
    interface Error {
      message: string;
      /** Set when nobody foresaw the failure: the log has the rest under this id. */
      errorId?: string | undefined;
      /** A stable word for programs. */
      code?: string;
      /** What is wrong with what was sent, and where. */
      problems?: readonly Problem[];
      /** The import that keeps a file which could not be stored. */
      importId?: string;
      /** What is stored now, when a save came too late. */
      current?: unknown;
      retryAfterSeconds?: number;
    }
  }
}

export {};
