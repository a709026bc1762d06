import { toast } from 'svelte-sonner';

interface Details {
  /** A second line. */
  readonly detail?: string;
  /** What can be undone, is: the message offers it while it stands. */
  readonly undo?: () => void;
}

/**
 * Says in a passing message what was done. For what must not be missed use a Notice on the page: this one goes
 * away by itself, though an offer to undo stands twice as long.
 */
export function notify(message: string, { detail, undo }: Details = {}): void {
  toast(message, {
    ...(detail === undefined ? {} : { description: detail }),
    ...(undo === undefined ? {} : { action: { label: 'Undo', onClick: undo }, duration: 12_000 })
  });
}

/** Says that something did not work and what to do; it stays until it is closed. */
export function notifyProblem(message: string, detail?: string): void {
  toast.error(message, { ...(detail === undefined ? {} : { description: detail }), duration: Infinity });
}
