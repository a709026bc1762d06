import type { Actor } from '$lib/domain/actor';

declare global {
  namespace App {
    interface Locals {
      /** Set by the request hook: correlates log lines and error pages. */
      requestId: string;
      /** The signed-in member of the active lab; null for a stranger. */
      actor: Actor | null;
    }
    interface Error {
      message: string;
      errorId?: string;
    }
  }
}

export {};
