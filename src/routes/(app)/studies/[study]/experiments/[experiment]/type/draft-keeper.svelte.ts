import { deserialize } from '$app/forms';
import { changedCells, laidOver, type TypedCells } from '$lib/domain/typed-cells';

/** kept: the server has it; keeping: on its way; here only: this browser alone has it so far. */
export type KeptState = 'kept' | 'keeping' | 'here only';

const waitMs = 700;
const againMs = 8000;

/**
 * Keeps what is typed: sends changes to the server a moment after they are made, and holds them in this browser until the server has
 * them, so that a lost connection, an ended session or a closed page loses nothing.
 */
export class DraftKeeper {
  state = $state<KeptState>('kept');
  keptAt = $state<string | null>(null);
  /** Why the server did not take it, in its words. */
  trouble = $state<string | null>(null);
  readonly #store: string;
  #pending: TypedCells = {};
  #timer: ReturnType<typeof setTimeout> | null = null;
  #sending: Promise<void> | null = null;

  /** @param place the address of the grid, under which unsent cells are held */
  constructor(place: string, person: string) {
    this.#store = `headwater typed ${person} ${place}`;
  }

  /** What an earlier visit could not send. */
  unsent(): TypedCells {
    try {
      return (JSON.parse(localStorage.getItem(this.#store) ?? '{}') as TypedCells) ?? {};
    } catch {
      return {};
    }
  }

  change(cells: TypedCells): void {
    if (Object.keys(cells).length === 0) return;
    this.#pending = laidOver(this.#pending, cells);
    this.#hold();
    this.state = 'keeping';
    this.#soon(waitMs);
  }

  /** Everything was sent with a form, or thrown away. */
  settled(): void {
    this.#pending = {};
    this.#hold();
  }

  stop(): void {
    if (this.#timer) clearTimeout(this.#timer);
    this.#timer = null;
  }

  #soon(ms: number): void {
    this.stop();
    this.#timer = setTimeout(() => void this.send(), ms);
  }

  /** Sends what waits; one at a time. */
  async send(): Promise<void> {
    if (this.#sending) await this.#sending;
    if (Object.keys(this.#pending).length === 0) return;
    this.#sending = this.#send();
    try {
      await this.#sending;
    } finally {
      this.#sending = null;
    }
  }

  async #send(): Promise<void> {
    const sent = this.#pending;
    const body = new FormData();
    body.set('cells', JSON.stringify(sent));
    try {
      const answer = await fetch('?/keep', {
        method: 'POST',
        body,
        headers: { 'x-sveltekit-action': 'true' }
      });
      const result = deserialize(await answer.text());
      if (result.type === 'success') {
        this.#pending = changedCells(sent, laidOver(sent, this.#pending));
        this.keptAt = String(result.data?.keptAt ?? '');
        this.trouble = null;
        this.state = Object.keys(this.#pending).length > 0 ? 'keeping' : 'kept';
        this.#hold();
        if (this.state === 'keeping') this.#soon(waitMs);
        return;
      }
      this.trouble =
        result.type === 'failure'
          ? String(result.data?.message ?? Object.values(result.data?.errors ?? {})[0] ?? '')
          : null;
    } catch {
      this.trouble = null;
    }
    this.state = 'here only';
    this.#soon(againMs);
  }

  #hold(): void {
    try {
      if (Object.keys(this.#pending).length === 0) localStorage.removeItem(this.#store);
      else localStorage.setItem(this.#store, JSON.stringify(this.#pending));
    } catch {
      // A browser that holds nothing still sends.
    }
  }
}
