/** How a person wants the screen: a choice of theirs, or whatever their system says. */
export const themes = ['light', 'dark', 'system'] as const;
export type Theme = (typeof themes)[number];

/** The cookie that holds the choice; readable in the browser, so that a switch repaints at once. */
export const themeCookie = 'headwater-theme';

/** The theme a cookie or a form field names; `system` for anything else. */
export function parseTheme(value: unknown): Theme {
  return themes.find((theme) => theme === value) ?? 'system';
}
