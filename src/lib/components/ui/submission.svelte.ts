import type { SubmitFunction } from '@sveltejs/kit';
import { tick } from 'svelte';
import { invalidateAll } from '$app/navigation';

type Answered = Exclude<Awaited<ReturnType<SubmitFunction>>, void>;

export interface Submission {
  readonly busy: boolean;
  readonly submit: SubmitFunction;
}

/**
 * State of one form while `use:enhance` sends it: `<form use:enhance={saving.submit}>` and
 * `<Button busy={saving.busy}>`. A second submission while the first is under way is cancelled.
 *
 * @param after runs once the answer is in; without it the form is updated the usual way, and a form that
 *   came back with errors keeps what was typed.
 */
export function submission(after?: Answered): Submission {
  let busy = $state(false);
  return {
    get busy() {
      return busy;
    },
    submit: ({ cancel }) => {
      if (busy) {
        cancel();
        return;
      }
      busy = true;
      return async (options) => {
        try {
          if (after) await after(options);
          else await options.update({ reset: false });
          // Somebody else was faster: the page shows what is stored now, and a second save knows of it.
          if (options.result.type === 'failure' && options.result.status === 409) await invalidateAll();
          if (!after && options.result.type === 'failure') await showTrouble(options.formElement);
        } finally {
          busy = false;
        }
      };
    }
  };
}

/** Takes the person to the first field that needs mending, or to the word on what went wrong. */
async function showTrouble(form: HTMLFormElement): Promise<void> {
  await tick();
  const field = form.querySelector<HTMLElement>('[aria-invalid="true"]');
  if (field) field.focus();
  else
    document.querySelector('main [role="status"], main [role="alert"]')?.scrollIntoView({ block: 'center' });
}
