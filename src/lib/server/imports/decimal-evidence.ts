import { parseNumber } from './parse-number';
import type { DecimalMark } from './types';

/** What the texts of a column, or of a file, prove about their decimal mark. */
export interface DecimalEvidence {
  /** A text that can only be read with that mark; null where there is none. */
  readonly point: string | null;
  readonly comma: string | null;
}

/** @param texts cell texts, limits such as "<0,5" included; what is no number proves nothing */
export function decimalEvidence(texts: Iterable<string>): DecimalEvidence {
  let point: string | null = null;
  let comma: string | null = null;
  for (const text of texts) {
    if (point !== null && comma !== null) break;
    const number = parseNumber(text.replace(/^\s*[<>≤≥]\s*=?/u, ''));
    if (number.kind !== 'number') continue;
    if (number.evidence === 'point') point ??= text;
    if (number.evidence === 'comma') comma ??= text;
  }
  return { point, comma };
}

export function joinEvidence(all: readonly DecimalEvidence[]): DecimalEvidence {
  return {
    point: all.find(({ point }) => point !== null)?.point ?? null,
    comma: all.find(({ comma }) => comma !== null)?.comma ?? null
  };
}

/** @returns the mark, or null where nothing or both are proven */
export function provenMark({ point, comma }: DecimalEvidence): DecimalMark | null {
  if (point !== null && comma === null) return 'point';
  if (comma !== null && point === null) return 'comma';
  return null;
}
