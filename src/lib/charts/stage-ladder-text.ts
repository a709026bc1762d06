import { percentText } from '$lib/domain/figure-text';
import type { StagePoint, StageReach } from '$lib/views/stage-ladder';

export interface NamedPoint {
  readonly point: StagePoint;
  readonly text: string;
}

/**
 * The points that a strip names, the most telling first: on the whole method up to three outside (else the one that is
 * furthest from 100), at a stage the worst loss, at a signal stage the largest bias.
 */
export function namedPoints(
  points: readonly StagePoint[],
  kind: 'whole' | 'loss' | 'signal',
  limits: readonly number[] = []
): NamedPoint[] {
  const named = (point: StagePoint): NamedPoint => ({
    point,
    text: `${point.name} ${percentText(point.value, limits)}`
  });
  const size = ({ value }: StagePoint): number =>
    kind === 'loss' ? value : Math.abs(value - (kind === 'whole' ? 100 : 0));
  const sorted = [...points].sort((a, b) => size(b) - size(a));
  const outside = sorted.filter(({ verdict }) => verdict === 'outside');
  return (kind === 'whole' && outside.length > 0 ? outside.slice(0, 3) : sorted.slice(0, 1)).map(named);
}

function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  const upper = sorted[Math.floor(sorted.length / 2)] ?? 0;
  const lower = sorted[Math.ceil(sorted.length / 2) - 1] ?? 0;
  return (lower + upper) / 2;
}

/** A strip in a sentence: "Drying takes: 26 analytes, median 2.1 points, from 0.2 to 12.4 (Metformin)." */
export function stripSentence(head: string, points: readonly StagePoint[], unit: '%' | 'points'): string {
  if (points.length === 0) return `${head}: no figures yet.`;
  const sorted = [...points].sort((a, b) => a.value - b.value);
  const [first, last] = [sorted[0], sorted.at(-1)] as [StagePoint, StagePoint];
  const middle = percentText(median(points.map(({ value }) => value)));
  return `${head}: ${points.length} analytes, median ${middle} ${unit}, from ${percentText(first.value)} (${first.name}) to ${percentText(last.value)} (${last.name}).`;
}

/** What is left below a reach, in words. */
export function remainingSentence({ name, remaining }: StageReach): string {
  return remaining === null
    ? `What is left below ${name.toLowerCase()} is not known.`
    : `Median ${percentText(remaining)} of 100 left below ${name.toLowerCase()}.`;
}
