import { describe, expect, it } from 'vitest';
import { page } from 'vitest/browser';
import { render } from 'vitest-browser-svelte';
import SequenceChart from '../../src/lib/charts/SequenceChart.svelte';
import type { SequenceInjectionView, SequenceView } from '../../src/lib/views/sequences';
import { expectNoViolations } from './axe';

const injection = (place: number, over: Partial<SequenceInjectionView>): SequenceInjectionView => ({
  id: String(place),
  place,
  kind: 'extract',
  label: `S${place}`,
  time: null,
  experiment: null,
  flagged: 0,
  measured: 2,
  failed: 0,
  held: 0,
  ...over
});

const view: Pick<SequenceView, 'injections' | 'sets'> = {
  injections: [
    injection(1, { kind: 'level', label: 'L1' }),
    injection(2, { kind: 'second source', label: 'ICV', held: 2 }),
    injection(3, { kind: 'blank', label: 'IB', held: 2 }),
    injection(4, { kind: 'continuing', label: 'CCV', held: 2 }),
    injection(5, { flagged: 1 }),
    injection(6, { kind: 'continuing', label: 'CCV', failed: 1, held: 2 })
  ],
  sets: [
    {
      id: 'set',
      name: 'March standards',
      href: '/set',
      standards: [{ id: 'is', name: 'Label', points: [{ place: 5, percent: 104, fails: false }] }],
      standardRule: null,
      standardLimits: [50, 200],
      drift: [
        {
          id: 'a',
          name: 'Diuron',
          points: [
            { place: 4, percent: 101, fails: false },
            { place: 6, percent: 132, fails: true }
          ]
        }
      ],
      driftRule: null,
      driftLimits: [80, 120]
    }
  ]
};

describe('SequenceChart', () => {
  it('tells what each injection is by letter and shape, and names what fails', async () => {
    await page.viewport(1280, 800);
    const screen = await render(SequenceChart, {
      view,
      title: 'Sequence of Instrument 1',
      description: 'Six injections.'
    });
    const picture = screen.getByRole('img', { name: 'Sequence of Instrument 1' });
    await expect.element(picture).toBeVisible();
    const letters = [...picture.element().querySelectorAll('g > text')].map(({ textContent }) => textContent);
    expect(letters.filter((text) => /^[LSBCE]$/.test(text ?? '')).join('')).toBe('LSBCEC');
    const titles = [...picture.element().querySelectorAll('title')].map(({ textContent }) =>
      textContent?.trim()
    );
    expect(titles).toContain('5, S5: 1 of 2 analytes flagged');
    expect(titles).toContain('6, CCV: 1 of 2 fail');
    expect(titles).toContain('Diuron, place 6: 132 %, fails');
    await expectNoViolations();
  });

  it('keeps the page still on a phone: the picture scrolls by itself', async () => {
    await page.viewport(390, 800);
    await render(SequenceChart, { view, title: 'Sequence', description: 'Six injections.' });
    expect(document.documentElement.scrollWidth).toBeLessThanOrEqual(390);
    await expectNoViolations();
  });
});
