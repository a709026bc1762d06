import { describe, expect, it } from 'vitest';
import { page, userEvent } from 'vitest/browser';
import { render } from 'vitest-browser-svelte';
import MassBalanceChart from '../../src/lib/charts/MassBalanceChart.svelte';
import StageLadder from '../../src/lib/charts/StageLadder.svelte';
import WalkBackChart from '../../src/lib/charts/WalkBackChart.svelte';
import type { StageLadderView } from '../../src/lib/views/stage-ladder';
import type { WalkBackView } from '../../src/lib/views/walk-back';
import { balanceRow, balanceView } from '../unit/charts/fixtures';
import { expectNoViolations } from './axe';

const balance = balanceView(
  balanceRow(
    'NDMA',
    { first: 6, carbon: 43.3, aqueous: 4 },
    { verdict: 'outside', reasons: ['49.3 < 70'], downstream: 16, open: 30.7, openSignificant: true }
  ),
  balanceRow('Atrazine', { first: 93 }, { incomplete: 'aqueous layer missing in replicate 3' }),
  balanceRow('Wild', { first: 912 }, { verdict: 'outside', reasons: ['912 > 130'] })
);

describe('MassBalanceChart', () => {
  it('gives each row as a link with figure, verdict and reason', async () => {
    await page.viewport(1280, 800);
    const screen = await render(MassBalanceChart, { view: balance, title: 'Mass balance, variant D' });
    const row = screen.getByRole('link', { name: /^NDMA, 49.3 ± 4.0 %, outside: 49.3 < 70/ });
    await expect.element(row).toHaveAttribute('href', '?figure=NDMA');
    await expect.element(screen.getByText('→ 912 %')).toBeVisible();
    await expect.element(screen.getByText('aqueous layer missing in replicate 3')).toBeVisible();
    await expectNoViolations();
  });

  it('aims the link at the segment under the pointer, and back at the row when it leaves', async () => {
    await page.viewport(1280, 800);
    const screen = await render(MassBalanceChart, { view: balance, title: 'Mass balance' });
    const plot = screen.getByRole('img', { name: 'Mass balance' }).element().getBoundingClientRect();
    const row = screen.getByRole('link', { name: /^NDMA/ });
    const link = row.element().getBoundingClientRect();
    // The plot ends at 200 % here, and 30 % lies in the second cartridge.
    await userEvent.hover(row, {
      position: { x: plot.left - link.left + plot.width * 0.15, y: link.height / 2 }
    });
    await expect.element(row).toHaveAttribute('href', '?figure=NDMA-carbon');
    await expect.element(row).toHaveAttribute('title', 'Second cartridge: 43.3 %');
    await userEvent.hover(screen.getByText('The same figures as a table'));
    await expect.element(row).toHaveAttribute('href', '?figure=NDMA');
  });

  it('has a table twin with every part, its links and the open part that is not drawn', async () => {
    const screen = await render(MassBalanceChart, { view: balance, title: 'Mass balance' });
    await screen.getByText('The same figures as a table').click();
    const row = screen.getByRole('row', { name: /^NDMA/ });
    await expect.element(row).toHaveTextContent(/49\.3.*6\.0.*4\.0.*43\.3.*16\.0.*30\.7/);
    await expect
      .element(row.getByRole('link', { name: '43.3' }))
      .toHaveAttribute('href', '?figure=NDMA-carbon');
    await expectNoViolations();
  });

  it('asks for the table of a long chart by a link, prints it all the same, and comes with it where it was asked for', async () => {
    const rows = Array.from({ length: 41 }, (_, index) => balanceRow(`Compound ${index}`, { first: 90 }));
    const long = { view: balanceView(...rows), title: 'Mass balance', tableHref: '?table=shown#table' };
    const screen = await render(MassBalanceChart, long);
    const link = screen.getByRole('link', { name: 'The same figures as a table' });
    await expect.element(link).toHaveAttribute('href', '?table=shown#table');
    expect(document.querySelector('table')).toBeNull();
    window.dispatchEvent(new Event('beforeprint'));
    expect(document.querySelectorAll('details[open] tbody tr')).toHaveLength(41);
    await screen.rerender({ ...long, tableHref: undefined, tableId: 'table' });
    expect(document.querySelectorAll('details#table[open] tbody tr')).toHaveLength(41);
  });

  it('sets name, figure and mark above a full-width bar on a phone', async () => {
    await page.viewport(390, 800);
    const screen = await render(MassBalanceChart, { view: balance, title: 'Mass balance' });
    const plot = screen.getByRole('img', { name: 'Mass balance' }).element().getBoundingClientRect();
    const row = screen.getByRole('link', { name: /^NDMA/ }).element().getBoundingClientRect();
    expect(Math.abs(plot.width - row.width)).toBeLessThan(1);
    expect(row.height).toBeGreaterThanOrEqual(44);
    expect(document.documentElement.scrollWidth).toBeLessThanOrEqual(390);
    await page.viewport(1280, 800);
  });
});

const at = (name: string, value: number, verdict: 'inside' | 'outside' | null = null) => ({
  panelEntryId: name,
  name,
  value,
  verdict,
  href: `?figure=${name}-${value}`
});
const ladder: StageLadderView = {
  criteria: { low: 70, high: 130 },
  wholeMethod: {
    note: 'what the extract holds, variant D',
    href: '?whole',
    points: [at('NDMA', 49.3, 'outside'), at('Atrazine', 93, 'inside')]
  },
  reaches: [
    {
      key: 'extraction',
      name: 'Extraction',
      number: 4,
      kind: 'loss',
      href: '?extraction',
      experiments: [{ title: 'spiked in the sample, 16 Oct', href: '?e1', detail: '7 spiked, 3 blanks' }],
      remaining: 92.4,
      points: [at('NDMA', 9), at('Atrazine', 3)],
      status: null,
      gap: null
    },
    {
      key: 'drying',
      name: 'Drying',
      number: 3,
      kind: 'loss',
      href: '?drying',
      experiments: [],
      remaining: null,
      points: [],
      status: null,
      gap: {
        text: 'Nothing has been spiked before drying yet.',
        href: '?new',
        action: 'Add a drying experiment'
      }
    },
    {
      key: 'instrument',
      name: 'Instrument',
      number: 1,
      kind: 'signal',
      href: '?instrument',
      experiments: [],
      remaining: 92.4,
      points: [at('NDMA', -2)],
      status: { verdict: 'inside', text: 'calibration accepted' },
      gap: null
    }
  ]
};

describe('StageLadder', () => {
  it('climbs from the detector: numbered reaches, what is left, the worst named, gaps with a first step', async () => {
    await page.viewport(1280, 800);
    const screen = await render(StageLadder, { view: ladder });
    await expect.element(screen.getByRole('heading', { name: '4 Extraction' })).toBeVisible();
    await expect.element(screen.getByText('Median 92.4 of 100 left below extraction.')).toBeInTheDocument();
    await expect.element(screen.getByText('NDMA 9.0')).toBeVisible();
    await expect.element(screen.getByText('NDMA 49.3')).toBeVisible();
    await expect.element(screen.getByText('1 outside')).toBeVisible();
    await expect
      .element(screen.getByRole('link', { name: 'Add a drying experiment' }))
      .toHaveAttribute('href', '?new');
    await expect
      .element(
        screen.getByRole('link', {
          name: 'Extraction takes: 2 analytes, median 6.0 points, from 3.0 (Atrazine) to 9.0 (NDMA).'
        })
      )
      .toHaveAttribute('href', '?extraction');
    await expectNoViolations();
  });

  it('never lays a name on a mark, however narrow the strip', async () => {
    for (const width of [390, 760, 1280]) {
      await page.viewport(width, 800);
      const screen = await render(StageLadder, { view: ladder });
      const name = screen.getByText('NDMA 49.3').element().getBoundingClientRect();
      const marks = [...screen.container.querySelectorAll('a span.absolute > svg')];
      expect(marks.length).toBeGreaterThan(0);
      for (const mark of marks) {
        const box = mark.getBoundingClientRect();
        expect(
          box.top >= name.bottom || box.bottom <= name.top || box.left >= name.right || box.right <= name.left
        ).toBe(true);
      }
      expect(document.documentElement.scrollWidth).toBeLessThanOrEqual(width);
      await screen.unmount();
    }
  });

  it('has a table twin', async () => {
    const screen = await render(StageLadder, { view: ladder });
    await screen.getByText('The same figures as a table').click();
    await expect
      .element(screen.getByRole('row', { name: /^NDMA/ }))
      .toHaveTextContent(/49\.3.*9\.0.*—.*−2\.0/);
    await expectNoViolations();
  });
});

const walkBack: WalkBackView = {
  stages: [
    { key: 'extraction', name: 'Extraction' },
    { key: 'drying', name: 'Drying' }
  ],
  rows: [
    {
      panelEntryId: 'NDMA',
      name: 'NDMA',
      remaining: 79,
      gap: 'drying not spiked',
      href: '?figure=NDMA',
      losses: [
        {
          stageKey: 'extraction',
          lost: 12,
          interval: { lower: 8, upper: 16, level: 0.95 },
          pAdjusted: 0.002,
          href: '?1'
        },
        null
      ]
    }
  ]
};

it('the walk-back reads each row with its intervals and has a table twin', async () => {
  await page.viewport(1280, 800);
  const screen = await render(WalkBackChart, { view: walkBack, title: 'Walk-back' });
  await expect
    .element(
      screen.getByRole('link', {
        name: /^NDMA: Extraction takes 12.0 \(8.0 to 16.0\), Drying not known, 79.0 of 100 left; drying not spiked/
      })
    )
    .toHaveAttribute('href', '?figure=NDMA');
  await expectNoViolations();
  await screen.getByText('The same figures as a table').click();
  await expect
    .element(screen.getByRole('row', { name: /^NDMA/ }))
    .toHaveTextContent(/12\.0.*8\.0 to 16\.0.*0\.0020/);
  await expectNoViolations();
});
