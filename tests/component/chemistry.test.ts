import { describe, expect, it } from 'vitest';
import { page } from 'vitest/browser';
import { render } from 'vitest-browser-svelte';
import NeutralChart from '../../src/lib/charts/NeutralChart.svelte';
import NeutralTable from '../../src/lib/charts/NeutralTable.svelte';
import ChemistryFindings from '../../src/lib/components/planning/ChemistryFindings.svelte';
import ChemistryStructure from '../../src/lib/components/planning/ChemistryStructure.svelte';
import type { ChargeGroupView, PanelChemistryRow } from '../../src/lib/views/panel-chemistry';
import type { StructureView } from '../../src/lib/views/structure';
import { expectNoViolations } from './axe';

/** The row of an acid at pH 7, its shares by Henderson and Hasselbalch. */
function acidRow(name: string, pka: number, own: Partial<PanelChemistryRow> = {}): PanelChemistryRow {
  const share = (ph: number): number => 1 / (1 + 10 ** (ph - pka));
  return {
    panelEntryId: name,
    analyteId: name,
    name,
    role: 'target',
    class: 'acid',
    also: [],
    evidence: `acid pKa ${pka}`,
    pkaAcid: [pka],
    pkaBase: [],
    logKow: { value: 3, basis: 'library', source: 'a handbook' },
    neutral: share(7),
    charge: share(7) > 0.5 ? 'none' : 'negative',
    logD: 3 + Math.log10(share(7)),
    curve: { from: 0, step: 0.25, values: Array.from({ length: 57 }, (_, index) => share(index / 4)) },
    neutralRanges: [{ low: 0, high: pka - Math.log10(99) }],
    chargedRanges: [{ low: pka + Math.log10(99), high: 14 }],
    unknown: null,
    href: `?analyte=${name}`,
    ...own
  };
}

const group = (key: string, title: string, rows: readonly PanelChemistryRow[]): ChargeGroupView => ({
  key,
  title,
  question: 'Would a lower pH hold them?',
  atPh: 'At pH 7, none is at least 99 % neutral.',
  findings: [],
  source: 'common practice, no source',
  standing: 'practice',
  rows
});
const unknown = acidRow('Unheard-of', 4, {
  neutral: null,
  charge: null,
  logD: null,
  logKow: null,
  pkaAcid: [],
  curve: null,
  neutralRanges: [],
  chargedRanges: [],
  unknown: 'neither pKa nor log Kow on file'
});
const groups = [
  group('acid', 'Acids', [acidRow('Ibuprofen', 4.91), acidRow('Phenol', 9.99, { also: ['volatile'] })]),
  group('unknown', 'Not known', [unknown])
];
const planned = [
  { ph: 2, variants: [{ code: 'A', name: 'At pH 2' }] },
  {
    ph: 7,
    variants: [
      { code: 'C', name: 'At pH 7' },
      { code: 'D', name: 'At pH 7 too' }
    ]
  }
];

describe('NeutralChart', () => {
  it('gives each analyte as a link that says its share, its charge and where it is neutral', async () => {
    await page.viewport(1280, 800);
    const screen = await render(NeutralChart, { groups, ph: 7, planned, title: 'Neutral share over pH' });
    const row = screen.getByRole('link', {
      name: /^Ibuprofen: 0\.8 % neutral at pH 7, mostly negative; log D 0\.9;/
    });
    await expect.element(row).toHaveAttribute('href', '?analyte=Ibuprofen');
    await expect.element(row).toHaveAccessibleName(/at least 99 % neutral below pH 2\.9$/);
    await expect.element(screen.getByRole('heading', { name: /^Acids/ })).toBeVisible();
    await expect.element(screen.getByText('C, D')).toBeVisible();
    await expectNoViolations();
  });

  it('says why a strip is empty, and draws none', async () => {
    const screen = await render(NeutralChart, { groups, ph: 7, planned, title: 'Neutral share over pH' });
    const row = screen.getByRole('link', { name: 'Unheard-of: neither pKa nor log Kow on file' });
    expect(row.element().querySelector('svg')).toBeNull();
  });

  it('keeps name, share and strip in sight on a phone', async () => {
    await page.viewport(390, 800);
    const screen = await render(NeutralChart, { groups, ph: 7, planned, title: 'Neutral share over pH' });
    const row = screen.getByRole('link', { name: /^Phenol/ }).element();
    const strip = row.querySelector('svg')?.getBoundingClientRect();
    expect(strip?.width).toBeGreaterThan(300);
    expect(row.getBoundingClientRect().height).toBeGreaterThanOrEqual(44);
    expect(document.documentElement.scrollWidth).toBeLessThanOrEqual(390);
    await expectNoViolations();
  });

  it('marks the row that is open, and draws the chosen pH solid and the other planned one dashed', async () => {
    await page.viewport(1280, 800);
    const screen = await render(NeutralChart, {
      groups,
      ph: 7,
      planned,
      title: 'Neutral share over pH',
      highlighted: 'Phenol'
    });
    const row = screen.getByRole('link', { name: /^Phenol/ });
    await expect.element(row).toHaveAttribute('aria-current', 'true');
    const paths = [...row.element().querySelectorAll('path')];
    expect(paths.filter((path) => path.getAttribute('d') === 'M70 0V100')).toHaveLength(1);
    expect(
      paths.find((path) => path.getAttribute('d') === 'M20 0V100')?.getAttribute('stroke-dasharray')
    ).toBe('2 2');
  });
});

it('the table twin has every figure of the chart in words', async () => {
  await page.viewport(1280, 800);
  const screen = await render(NeutralTable, { groups, ph: 7, caption: 'Neutral share over pH' });
  await expect
    .element(screen.getByRole('row', { name: /^Ibuprofen/ }))
    .toHaveTextContent(/Acids.*4\.91.*3.*the library's.*0\.8.*negative.*0\.9.*below 2\.9.*above 7/);
  await expect
    .element(screen.getByRole('row', { name: /^Unheard-of/ }))
    .toHaveTextContent('neither pKa nor log Kow');
  await expectNoViolations();
});

describe('ChemistryStructure', () => {
  const structure: StructureView = {
    drawing:
      '<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 10 10" width="10" height="10" role="img" aria-label="Structure of o-Cresol"><line stroke="currentColor" x1="0" y1="0" x2="9" y2="9"/></svg>',
    problem: null,
    formula: { typed: 'C7H9O', computed: 'C7H8O', agree: false },
    molarMass: { typed: null, computed: '108.14', agree: null },
    logKow: { value: 1.98, basis: 'predicted', source: 'predicted from the structure' },
    notes: []
  };

  it('shows what was typed, says which it is and what the structure says', async () => {
    const screen = await render(ChemistryStructure, { structure });
    await expect.element(screen.getByRole('img', { name: 'Structure of o-Cresol' })).toBeVisible();
    await expect
      .element(screen.getByText('typed and used; the structure says C7H8O. Which of the two is right?'))
      .toBeVisible();
    await expect.element(screen.getByText('computed from the structure, nothing was typed')).toBeVisible();
    await expect.element(screen.getByText('predicted', { exact: true })).toBeVisible();
    await expectNoViolations();
  });

  it('says why there is no drawing', async () => {
    const screen = await render(ChemistryStructure, {
      structure: { ...structure, drawing: null, problem: "'C1' cannot be read." }
    });
    await expect.element(screen.getByText(/There is no drawing: 'C1' cannot be read/)).toBeVisible();
  });
});

it('a finding carries its evidence and its source', async () => {
  const finding = {
    text: 'Would less do?',
    evidence: 'It is much.',
    source: 'common practice, no source',
    standing: 'practice'
  } as const;
  const screen = await render(ChemistryFindings, { findings: [finding, finding] });
  await expect
    .element(screen.getByRole('listitem').first())
    .toHaveTextContent(/It is much.*Would less do\?.*common practice, no source/);
  await expectNoViolations();
});
