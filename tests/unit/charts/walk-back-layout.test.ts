import { describe, expect, it } from 'vitest';
import { standsOut, walkBackLayout } from '../../../src/lib/charts/walk-back-layout';
import { walkBackNotes, walkBackSentence } from '../../../src/lib/charts/walk-back-text';
import type { WalkBackRow, WalkBackView } from '../../../src/lib/views/walk-back';

const loss = (stageKey: string, lost: number, pAdjusted: number | null) => ({
  stageKey,
  lost,
  interval: { lower: lost - 4, upper: lost + 4, level: 0.95 },
  pAdjusted,
  href: `?figure=${stageKey}`
});
const row = (name: string, losses: WalkBackRow['losses']): WalkBackRow => ({
  panelEntryId: name,
  name,
  losses,
  remaining: 50,
  gap: null,
  href: '?'
});
const view: WalkBackView = {
  stages: [
    { key: 'extraction', name: 'Extraction' },
    { key: 'drying', name: 'Drying' }
  ],
  rows: [
    row('NDMA', [loss('extraction', 9, 0.3), loss('drying', 12, 0.002)]),
    row('Phenol', [loss('extraction', 2, null), null])
  ]
};

describe('walkBackLayout', () => {
  it('puts every stage on one scale, in procedure order', () => {
    const layout = walkBackLayout(view);
    expect(layout.panels.map(({ name }) => name)).toEqual(['Extraction', 'Drying']);
    const x = (path: string | undefined): number => Number(/^M([\d.]+)/.exec(path ?? '')?.[1]);
    const zero = x(layout.zero);
    const [extraction, drying] = layout.panels;
    expect((x(drying?.clear) - zero) / (x(extraction?.faint) - zero)).toBeCloseTo(12 / 9, 1);
  });

  it('fills only the dots that their test tells from nothing', () => {
    const [extraction, drying] = walkBackLayout(view).panels;
    expect(extraction?.clear).toBe('');
    expect(extraction?.faint.match(/M/g)).toHaveLength(2);
    expect(drying?.clear.match(/M/g)).toHaveLength(1);
    expect(drying?.whiskers.match(/M/g)).toHaveLength(1);
  });

  it.each([
    [0.049, true],
    [0.05, false],
    [null, false]
  ])('with an adjusted p of %s stands out: %s', (p, expected) => {
    expect(standsOut(p)).toBe(expected);
  });
});

it('reads a row aloud with its intervals and what is not known', () => {
  expect(view.rows.map((each) => walkBackSentence(each, view.stages))).toEqual([
    'NDMA: Extraction takes 9.0 (5.0 to 13.0), Drying takes 12.0 (8.0 to 16.0), 50.0 of 100 left',
    'Phenol: Extraction takes 2.0 (−2.0 to 6.0), Drying not known, 50.0 of 100 left'
  ]);
});

it('says each reason once, with its analytes, and does not list all of them', () => {
  const noted = (name: string, gap: string | null): WalkBackRow => ({ ...row(name, []), gap });
  const notesOf = (...rows: WalkBackRow[]) => walkBackNotes({ ...view, rows });
  expect(notesOf(noted('A', 'No drying.'), noted('B', null), noted('C', 'No drying.'))).toEqual([
    { text: 'No drying.', names: ['A', 'C'] }
  ]);
  expect(notesOf(noted('A', 'No drying.'), noted('B', 'No drying.'))).toEqual([
    { text: 'No drying.', names: ['All 2 analytes'] }
  ]);
});
