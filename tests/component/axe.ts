import axe from 'axe-core';
import { expect } from 'vitest';
import '../../src/app.css';
import '@fontsource-variable/source-sans-3/wght.css';

/** Rules that speak of a whole page, which a component by itself is not. */
const pageRules = ['region', 'page-has-heading-one', 'landmark-one-main'];

/** A colour on its way to another has a contrast of its own. */
function stopTransitions(): void {
  const style = document.createElement('style');
  style.textContent = '*, ::before, ::after { transition: none !important; animation: none !important }';
  document.head.append(style);
}

/** Finds nothing against WCAG 2.2 AA in what is rendered, in both themes. */
export async function expectNoViolations(): Promise<void> {
  stopTransitions();
  for (const theme of ['light', 'dark']) {
    document.documentElement.dataset.theme = theme;
    const { violations } = await axe.run(document, {
      runOnly: ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice'],
      rules: Object.fromEntries(pageRules.map((rule) => [rule, { enabled: false }]))
    });
    const found = violations.map(
      ({ id, nodes }) =>
        `${theme}: ${id} at ${nodes.map(({ html, failureSummary }) => `${html} ${failureSummary ?? ''}`).join('; ')}`
    );
    expect(found).toEqual([]);
  }
  document.documentElement.dataset.theme = 'light';
}
