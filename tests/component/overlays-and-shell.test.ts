import { createRawSnippet } from 'svelte';
import { describe, expect, it, vi } from 'vitest';
import { page, userEvent } from 'vitest/browser';
import { render } from 'vitest-browser-svelte';
import StudyNav from '../../src/lib/components/shell/StudyNav.svelte';
import TopBar from '../../src/lib/components/shell/TopBar.svelte';
import ConfirmDialog from '../../src/lib/components/ui/ConfirmDialog.svelte';
import Drawer from '../../src/lib/components/ui/Drawer.svelte';
import Toaster from '../../src/lib/components/ui/Toaster.svelte';
import { notify, notifyProblem } from '../../src/lib/components/ui/notify';
import { expectNoViolations } from './axe';

const navigation = vi.hoisted(() => ({ goto: vi.fn() }));
vi.mock('$app/navigation', async (original) => ({ ...(await original<object>()), goto: navigation.goto }));

const words = (html: string) => createRawSnippet(() => ({ render: () => `<p>${html}</p>` }));

describe('Drawer', () => {
  it('stands beside a wide page without taking it away', async () => {
    await page.viewport(1280, 800);
    const screen = await render(Drawer, {
      label: 'Provenance',
      title: 'Metformin, method recovery',
      closeHref: '?variant=d',
      children: words('Six replicates.')
    });
    const drawer = screen.getByRole('dialog', { name: 'Metformin, method recovery' });
    await expect.element(drawer).toBeVisible();
    await expect.element(drawer).not.toHaveAttribute('aria-modal');
    expect(getComputedStyle(document.body).pointerEvents).not.toBe('none');
    await expect.element(screen.getByRole('link', { name: 'Close' })).toHaveAttribute('href', '?variant=d');
    await expectNoViolations();
  });

  it('fills a phone and is modal there', async () => {
    await page.viewport(390, 800);
    const screen = await render(Drawer, {
      label: 'Provenance',
      title: 'Metformin',
      closeHref: '?',
      children: words('Six replicates.')
    });
    const drawer = screen.getByRole('dialog');
    await expect.element(drawer).toHaveAttribute('aria-modal', 'true');
    expect(drawer.element().getBoundingClientRect().width).toBe(390);
    await page.viewport(1280, 800);
  });

  it('closes on Escape by going to the address without it', async () => {
    navigation.goto.mockClear();
    await render(Drawer, {
      label: 'Provenance',
      title: 'Metformin',
      closeHref: '?a=1',
      children: words('x')
    });
    await userEvent.keyboard('{Escape}');
    await vi.waitFor(() => expect(navigation.goto).toHaveBeenCalledWith('?a=1', expect.anything()));
  });
});

describe('ConfirmDialog', () => {
  const props = {
    open: true,
    title: 'Set S4 aside?',
    action: '?/exclude',
    confirm: 'Set aside',
    fields: { replicate: 'r4' },
    cause: { recent: ['vial cracked'] },
    children: words('Two analytes move to watch.')
  };

  it('says what will happen, asks why, and carries its fields', async () => {
    await render(ConfirmDialog, props);
    const dialog = page.getByRole('dialog', { name: 'Set S4 aside?' });
    await expect.element(dialog).toHaveTextContent('Two analytes move to watch.');
    await expect.element(page.getByRole('textbox', { name: 'Why?' })).toBeRequired();
    expect(dialog.element().querySelector<HTMLInputElement>('input[name="replicate"]')?.value).toBe('r4');
    await expectNoViolations();
  });

  it('goes away on "Leave it as it is" and on Escape', async () => {
    await render(ConfirmDialog, props);
    await page.getByRole('button', { name: 'Leave it as it is' }).click();
    await expect.element(page.getByRole('dialog')).not.toBeInTheDocument();
    await render(ConfirmDialog, props);
    await expect.element(page.getByRole('dialog')).toBeVisible();
    await userEvent.keyboard('{Escape}');
    await expect.element(page.getByRole('dialog')).not.toBeInTheDocument();
  });

  it('shows at the box what is wrong with the cause', async () => {
    await render(ConfirmDialog, { ...props, error: 'Say what happened to the replicate.' });
    await expect.element(page.getByRole('textbox', { name: 'Why?' })).toBeInvalid();
  });
});

it('a message offers to undo what was done, and a problem stays', async () => {
  const undo = vi.fn();
  await render(Toaster, {});
  notify('S4 set aside.', { detail: 'Two analytes moved to watch.', undo });
  await expect.element(page.getByText('Two analytes moved to watch.')).toBeVisible();
  await page.getByRole('button', { name: 'Undo' }).click();
  expect(undo).toHaveBeenCalledOnce();
  notifyProblem('The sheet could not be read.', 'Save it as XLSX and try once more.');
  await expect.element(page.getByText('The sheet could not be read.')).toBeVisible();
});

describe('TopBar', () => {
  const props = {
    lab: { name: 'Aldermere Laboratory', isDemo: true },
    person: { name: 'R. Hale', role: 'chemist' as const },
    links: [{ href: '/studies', label: 'Studies' }],
    menu: [{ href: '/account', label: 'Your account' }],
    path: '/studies/7',
    find: true,
    query: 'metformin'
  };

  it('says whose lab it is, that its data are invented, and where one is', async () => {
    await page.viewport(1280, 800);
    const screen = await render(TopBar, props);
    await expect.element(screen.getByText('(invented demo data)')).toBeVisible();
    await expect
      .element(screen.getByRole('link', { name: 'Studies' }))
      .toHaveAttribute('aria-current', 'true');
    const find = screen.getByRole('searchbox', { name: 'Find a study, an analyte, a figure' });
    await expect.element(find).toHaveValue('metformin');
    await userEvent.keyboard('/');
    await expect.element(find).toHaveFocus();
    await expectNoViolations();
  });

  it('opens the person menu with role, colours and a way out that is a form', async () => {
    const screen = await render(TopBar, props);
    await screen.getByText('R. Hale').first().click();
    await expect.element(screen.getByText('Chemist', { exact: true })).toBeVisible();
    const out = screen.getByRole('button', { name: 'Sign out' });
    expect(out.element().closest('form')?.getAttribute('method')).toBe('POST');
    await expectNoViolations();
    await userEvent.keyboard('{Escape}');
    await expect.element(out).not.toBeInTheDocument();
  });

  it('repaints at once when other colours are chosen, and keeps the choice', async () => {
    const screen = await render(TopBar, props);
    await screen.getByText('R. Hale').first().click();
    const dark = screen.getByRole('button', { name: 'Dark' });
    await dark.click();
    await expect.element(dark).toHaveAttribute('aria-pressed', 'true');
    expect(document.documentElement.dataset.theme).toBe('dark');
    expect(document.cookie).toContain('headwater-theme=dark');
    expect(getComputedStyle(document.documentElement).backgroundColor).toBe('rgb(18, 25, 28)');
    await screen.getByRole('button', { name: 'Light' }).click();
    expect(getComputedStyle(document.documentElement).backgroundColor).toBe('rgb(250, 248, 243)');
  });
});

describe('StudyNav', () => {
  const props = {
    code: 'River 2026/3, revision 1',
    title: 'Polar organics in river-intake water',
    href: '/studies/7',
    path: '/studies/7/experiments/2',
    groups: [
      { group: 'Overview' as const, items: [{ href: '/studies/7', label: 'Stages' }] },
      {
        group: 'Bench' as const,
        items: [{ href: '/studies/7/experiments', label: 'Experiments', count: 9 }]
      },
      { group: 'Record' as const, items: [] }
    ]
  };

  it('marks the page one is below, and leaves out groups without pages', async () => {
    await page.viewport(1280, 800);
    const screen = await render(StudyNav, props);
    const navigation = screen.getByRole('navigation', { name: 'Study', exact: true });
    await expect
      .element(navigation.getByRole('link', { name: /Experiments/ }))
      .toHaveAttribute('aria-current', 'true');
    await expect
      .element(navigation.getByRole('link', { name: 'Stages' }))
      .not.toHaveAttribute('aria-current');
    await expect.element(navigation).not.toHaveTextContent('Record');
    await expectNoViolations();
  });

  it('folds into a menu on a phone that names the current page', async () => {
    await page.viewport(390, 800);
    const screen = await render(StudyNav, props);
    const folded = screen.getByRole('navigation', { name: 'Study, folded' });
    const link = folded.getByRole('link', { name: 'Stages' });
    await expect.element(link).not.toBeInTheDocument();
    await folded.getByText('Experiments').first().click();
    await expect.element(link).toBeVisible();
    await expectNoViolations();
    await page.viewport(1280, 800);
  });
});
