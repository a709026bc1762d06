import { createRawSnippet } from 'svelte';
import { describe, expect, it, vi } from 'vitest';
import { userEvent } from 'vitest/browser';
import { render } from 'vitest-browser-svelte';
import Button from '../../src/lib/components/ui/Button.svelte';
import CauseBox from '../../src/lib/components/ui/CauseBox.svelte';
import Caution from '../../src/lib/components/ui/Caution.svelte';
import Checkbox from '../../src/lib/components/ui/Checkbox.svelte';
import EmptyState from '../../src/lib/components/ui/EmptyState.svelte';
import Field from '../../src/lib/components/ui/Field.svelte';
import Figure from '../../src/lib/components/ui/Figure.svelte';
import Formula from '../../src/lib/components/ui/Formula.svelte';
import Notice from '../../src/lib/components/ui/Notice.svelte';
import Progress from '../../src/lib/components/ui/Progress.svelte';
import RadioGroup from '../../src/lib/components/ui/RadioGroup.svelte';
import Tabs from '../../src/lib/components/ui/Tabs.svelte';
import Verdict from '../../src/lib/components/ui/Verdict.svelte';
import { verdicts } from '../../src/lib/views/verdict';
import { expectNoViolations } from './axe';

const text = (words: string) => createRawSnippet(() => ({ render: () => `<span>${words}</span>` }));
const options = [
  { value: 'none', label: 'Nothing' },
  { value: 'native', label: 'Native amount', hint: 'the mean of the unspiked portions' }
];

describe('Button', () => {
  it('sends nothing and calls nothing while it is busy, and keeps the focus', async () => {
    const onclick = vi.fn();
    const submitted = vi.fn((event: Event) => event.preventDefault());
    const form = document.createElement('form');
    form.addEventListener('submit', submitted);
    document.body.append(form);
    const screen = await render(
      Button,
      { busy: true, busyLabel: 'Storing …', onclick, children: text('Store') },
      { baseElement: document.body, target: form } as never
    );
    const button = screen.getByRole('button', { name: 'Storing …' });
    await button.click({ force: true });
    expect(onclick).not.toHaveBeenCalled();
    expect(submitted).not.toHaveBeenCalled();
    await expect.element(button).toHaveAttribute('aria-busy', 'true');
    await expect.element(button).toHaveFocus();
    form.remove();
  });

  it('calls its handler when it is not busy', async () => {
    const onclick = vi.fn();
    const screen = await render(Button, { type: 'button', onclick, children: text('Store') });
    await screen.getByRole('button', { name: 'Store' }).click();
    expect(onclick).toHaveBeenCalledOnce();
  });

  it.each(['primary', 'secondary', 'quiet', 'danger'] as const)(
    'has no fault in its %s look, as a button and as a link',
    async (variant) => {
      await render(Button, { variant, children: text('Store') });
      await render(Button, { variant, href: '#there', children: text('Open') });
      await render(Button, { variant, disabled: true, children: text('Off') });
      await expectNoViolations();
    }
  );
});

describe('Field', () => {
  it('ties label, hint, unit and error to its control and keeps what was typed', async () => {
    const screen = await render(Field, {
      label: 'Spike level',
      name: 'level',
      type: 'number',
      unit: 'ng/L',
      hint: 'Per litre of sample',
      value: '48,2l3',
      error: "'48,2l3' where an amount was expected. Is the l a 1?"
    });
    const input = screen.getByRole('textbox', { name: 'Spike level' });
    await expect.element(input).toHaveValue('48,2l3');
    await expect.element(input).toHaveAttribute('inputmode', 'decimal');
    await expect.element(input).toBeInvalid();
    await expect
      .element(input)
      .toHaveAccessibleDescription(
        "Per litre of sample '48,2l3' where an amount was expected. Is the l a 1?"
      );
    await expect.element(screen.getByText('ng/L')).toBeVisible();
    await expectNoViolations();
  });

  it.each(['text', 'email', 'password', 'date', 'file', 'textarea', 'select'] as const)(
    'has no fault as %s',
    async (type) => {
      const screen = await render(Field, { label: 'Matrix', name: 'matrix', type, options, optional: true });
      await expect.element(screen.getByLabelText(/Matrix/)).toHaveAttribute('name', 'matrix');
      await expectNoViolations();
    }
  );
});

it('a checkbox and radios carry hint and error', async () => {
  const screen = await render(Checkbox, {
    label: 'Counts for the method',
    name: 'method',
    hint: 'It ends in the final extract',
    error: 'Say which of the two'
  });
  await expect
    .element(screen.getByRole('checkbox'))
    .toHaveAccessibleDescription('It ends in the final extract Say which of the two');
  const radios = await render(RadioGroup, { legend: 'Subtract', name: 's', options, value: 'native' });
  await expect.element(radios.getByRole('radio', { name: /Native amount/ })).toBeChecked();
  await expectNoViolations();
});

describe('Verdict', () => {
  it.each(verdicts)('says %s in words beside its mark', async (verdict) => {
    const screen = await render(Verdict, { verdict, detail: '49.3 < 70' });
    expect(screen.container.textContent?.trim().toLowerCase()).toBe(`${verdict}: 49.3 < 70`);
    expect(screen.container.querySelectorAll('svg')).toHaveLength(1);
    await expectNoViolations();
  });

  it('draws each verdict in a shape of its own, so that colour is not all', async () => {
    const shapes: string[] = [];
    for (const verdict of verdicts) {
      const { container } = await render(Verdict, { verdict });
      const mark = container.querySelector('svg > *');
      shapes.push(
        `${mark?.tagName} ${mark?.getAttribute('fill') === 'none'} ${mark?.getAttribute('stroke-dasharray')}`
      );
    }
    expect(new Set(shapes).size).toBe(verdicts.length);
  });

  it('says why there is none', async () => {
    const screen = await render(Verdict, { verdict: null, detail: 'native over four times the spike' });
    expect(screen.container.textContent).toContain('No verdict: native over four times the spike');
  });
});

it('a figure opens its provenance, and one that does not exist says why', async () => {
  const screen = await render(Figure, {
    value: '50.4',
    unit: '%',
    halfWidth: '5.4',
    level: 95,
    n: '6 of 7',
    href: '?figure=1'
  });
  const link = screen.getByRole('link');
  await expect.element(link).toHaveAttribute('href', '?figure=1');
  expect(link.element().textContent?.replace(/\s+/g, ' ').trim()).toBe('50.4 % ± 5.4 (95 %), n = 6 of 7');
  const missing = await render(Figure, { value: null, missing: 'one preparation has no interval' });
  await expect.element(missing.getByText('one preparation has no interval')).toBeInTheDocument();
  await expectNoViolations();
});

it('a formula is mathematical notation with a reading', async () => {
  const screen = await render(Formula, {
    reading: 'R = 100 m over m spike',
    formula: {
      kind: 'row',
      items: [
        { kind: 'name', text: 'R' },
        { kind: 'operator', text: '=' },
        {
          kind: 'fraction',
          over: { kind: 'name', text: 'n', bar: true },
          under: { kind: 'sub', base: { kind: 'name', text: 'm' }, sub: { kind: 'words', text: 'spike' } }
        }
      ]
    }
  });
  const math = screen.container.querySelector('math');
  expect(math?.namespaceURI).toBe('http://www.w3.org/1998/Math/MathML');
  expect(math?.getAttribute('alttext')).toBe('R = 100 m over m spike');
  expect([...(math?.querySelectorAll('mfrac, msub, mover') ?? [])].map(({ tagName }) => tagName)).toEqual([
    'mfrac',
    'mover',
    'msub'
  ]);
  expect(math?.querySelector('mfrac')?.namespaceURI).toBe('http://www.w3.org/1998/Math/MathML');
  await expectNoViolations();
});

it.each(['info', 'inside', 'watch', 'outside'] as const)('a %s notice has no fault', async (tone) => {
  const screen = await render(Notice, {
    tone,
    title: 'Four things',
    live: true,
    children: text('Two deviations.')
  });
  await expect
    .element(screen.getByRole(tone === 'outside' ? 'alert' : 'status'))
    .toHaveTextContent('Two deviations.');
  await expectNoViolations();
});

it('an empty state says what goes there, why it matters, and offers the first step', async () => {
  const screen = await render(EmptyState, {
    title: 'Nothing spiked before drying yet',
    href: '#new',
    action: 'Add a drying experiment',
    children: text('A loss there cannot be told from one in extraction.')
  });
  await expect
    .element(screen.getByRole('link', { name: 'Add a drying experiment' }))
    .toHaveAttribute('href', '#new');
  await render(Caution, {});
  await expectNoViolations();
});

it('progress says how far it is, or that nobody knows', async () => {
  const known = await render(Progress, {
    label: 'Reading',
    value: 4500,
    max: 9000,
    detail: 'row 4500 of 9000'
  });
  await expect
    .element(known.getByRole('progressbar', { name: 'Reading' }))
    .toHaveAttribute('aria-valuenow', '50');
  const unknown = await render(Progress, { label: 'Computing', value: null });
  await expect
    .element(unknown.getByRole('progressbar', { name: 'Computing' }))
    .not.toHaveAttribute('aria-valuenow');
  await expectNoViolations();
});

it('tabs are links, the open one marked', async () => {
  const screen = await render(Tabs, {
    label: 'Views of the study',
    current: '#b',
    tabs: [
      { href: '#a', label: 'Summary' },
      { href: '#b', label: 'Remarks', count: 4 }
    ]
  });
  await expect.element(screen.getByRole('link', { name: /Remarks/ })).toHaveAttribute('aria-current', 'page');
  await expect.element(screen.getByRole('link', { name: 'Summary' })).not.toHaveAttribute('aria-current');
  await expectNoViolations();
});

it('a recent cause is a first draft that can be edited', async () => {
  const screen = await render(CauseBox, { recent: ['vial cracked'] });
  await screen.getByRole('button', { name: 'vial cracked' }).click();
  const box = screen.getByRole('textbox', { name: 'Why?' });
  await expect.element(box).toHaveValue('vial cracked');
  await userEvent.type(box, ', S4');
  await expect.element(box).toHaveValue('vial cracked, S4');
  await expectNoViolations();
});
