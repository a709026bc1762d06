import { createHash } from 'node:crypto';
import canonicalize from 'canonicalize';

/** What a lab's first event names as the hash before it. */
export const chainStart = '0'.repeat(64);

/** One event as it is chained: plain values only, `at` in milliseconds as ISO 8601 in UTC. */
export interface ChainedEvent {
  readonly labId: string;
  readonly seq: number;
  readonly studyId: string | null;
  readonly actorId: string | null;
  readonly actorName: string;
  readonly action: string;
  readonly entity: string;
  readonly entityId: string | null;
  readonly sentence: string;
  readonly before: unknown;
  readonly after: unknown;
  readonly reason: string | null;
  readonly at: string;
  readonly previousHash: string;
}

/**
 * Replaces what neither PostgreSQL nor canonical JSON can hold (the character U+0000, halves of surrogate pairs) by U+FFFD
 * and dates by their ISO text, so that the value read back later hashes as it did when it was written.
 */
export function storable(value: unknown): unknown {
  if (value === undefined) return null;
  if (typeof value === 'string') return value.toWellFormed().replaceAll('\u0000', '\uFFFD');
  if (typeof value === 'bigint') return value.toString();
  if (value instanceof Date) return value.toISOString();
  if (Array.isArray(value)) return value.map(storable);
  if (typeof value === 'object' && value !== null) {
    const kept = Object.entries(value).filter(([, member]) => member !== undefined);
    return Object.fromEntries(kept.map(([key, member]) => [storable(key), storable(member)]));
  }
  return value;
}

/** The value in canonical JSON (RFC 8785). @throws Error on NaN, infinities and circular references. */
export function canonicalText(value: unknown): string {
  return canonicalize(storable(value)) ?? 'null';
}

/** SHA-256, hexadecimal, of the event in canonical JSON (RFC 8785), the hash of the event before it included. */
export function chainHash(event: ChainedEvent): string {
  return createHash('sha256').update(canonicalText(event), 'utf8').digest('hex');
}

/** The first event at which a chain does not hold, and in what. */
export interface BrokenLink {
  readonly seq: number;
  readonly fault: 'missing event' | 'previous hash' | 'hash';
  readonly sentence: string;
}

export interface ChainState {
  readonly seq: number;
  readonly hash: string;
}

/**
 * Holds one event against the event before it.
 * @returns what is broken, or null when the link holds
 */
export function checkLink(
  before: ChainState,
  event: ChainedEvent & Readonly<{ hash: string }>
): BrokenLink | null {
  const { hash, ...chained } = event;
  if (event.seq !== before.seq + 1) {
    const sentence = `Event ${before.seq + 1} is missing: the next one found is ${event.seq}.`;
    return { seq: before.seq + 1, fault: 'missing event', sentence };
  }
  if (event.previousHash !== before.hash) {
    const sentence = `Event ${event.seq} does not follow event ${before.seq}: the hash it names is not that event's.`;
    return { seq: event.seq, fault: 'previous hash', sentence };
  }
  if (chainHash(chained) !== hash) {
    const sentence = `Event ${event.seq} was changed after it was written: its content does not give its hash.`;
    return { seq: event.seq, fault: 'hash', sentence };
  }
  return null;
}
