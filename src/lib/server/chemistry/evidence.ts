/**
 * How far a statement can be relied on: `seen` in the document that is named, `memory` (quoted from memory, to be verified),
 * `practice` (a rule of the trade without a document).
 */
export type Standing = 'seen' | 'memory' | 'practice';

/** Where a value or a statement comes from. */
export interface Origin {
  readonly source: string;
  readonly standing: Standing;
}

/** Something a chemist should weigh: a fact or a question, what it rests on, and how far that can be relied on. */
export interface Finding extends Origin {
  readonly text: string;
  readonly evidence: string;
}

/** A range that is quoted of a property or a rule, with its origin. */
export interface SourcedRange extends Origin {
  readonly low: number;
  readonly high: number;
}

export const seen = (source: string): Origin => ({ source, standing: 'seen' });
export const fromMemory = (detail = ''): Origin => ({
  source: `from memory, verify${detail === '' ? '' : ` (${detail})`}`,
  standing: 'memory'
});
export const practice: Origin = { source: 'common practice, no source', standing: 'practice' };

/** Documents whose text was seen when this was written. */
export const documents = {
  solidPhase: (section = '') =>
    seen(`SW-846 Method 3535A, Rev. 1 (2007)${section === '' ? '' : `, ${section}`}`),
  gcMs: (section: string) => seen(`SW-846 Method 8270E, Rev. 6 (2018), ${section}`),
  drinkingWater: (method: string) => seen(`EPA Method ${method}`),
  poole: seen('C. F. Poole et al. (2000), abstract')
} as const;
