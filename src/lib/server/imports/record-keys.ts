import type { DraftRecord } from './map-sheet';

/** One extract, level or check. */
export function extractKey({ place }: DraftRecord): string {
  switch (place.kind) {
    case 'extract':
      return `${place.experimentId} ${place.replicateId} ${place.fractionId}`;
    case 'level':
      return `${place.calibrationSetId} ${place.levelId}`;
    case 'check':
      return `${place.calibrationSetId} ${place.checkStandardId}`;
  }
}

export function injectionKey(record: DraftRecord): string {
  return `${extractKey(record)} ${record.injection}`;
}

/** Lists by key, in the order in which they come. */
export function grouped<T>(
  list: readonly T[],
  keyOf: (item: T) => string | null
): ReadonlyMap<string, readonly T[]> {
  const groups = new Map<string, T[]>();
  for (const item of list) {
    const key = keyOf(item);
    if (key === null) continue;
    const group = groups.get(key);
    if (group) group.push(item);
    else groups.set(key, [item]);
  }
  return groups;
}

/** @returns NaN of none */
export function medianOf(values: readonly number[]): number {
  const sorted = [...values].sort((one, other) => one - other);
  const middle = sorted.length >> 1;
  const upper = sorted[middle] ?? NaN;
  return sorted.length % 2 === 1 ? upper : ((sorted[middle - 1] ?? NaN) + upper) / 2;
}

/** For sentences: three significant digits, without a power of ten where it can be helped. */
export function shortNumber(value: number): string {
  return String(Number(value.toPrecision(3)));
}
