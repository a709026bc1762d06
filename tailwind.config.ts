import type { Config } from 'tailwindcss';
import plugin from 'tailwindcss/plugin';
import { tokens } from './src/lib/domain/theme-tokens';

type Token = keyof typeof tokens;
const names = Object.keys(tokens) as Token[];

const variables = (theme: 0 | 1): Record<string, string> => ({
  'color-scheme': theme === 0 ? 'light' : 'dark',
  ...Object.fromEntries(names.map((name) => [`--${name}`, tokens[name][theme]]))
});

/**
 * Light is the base, so that paper is light whatever the screen shows. Dark follows the system until
 * a person chooses, and `data-theme` on the root element is that choice.
 */
const themes = plugin(({ addBase }) =>
  addBase({
    ':root': variables(0),
    '@media screen and (prefers-color-scheme: dark)': {
      ':root:where(:not([data-theme="light"]))': variables(1)
    },
    '@media screen': { '[data-theme="dark"]': variables(1) }
  })
);

const colors = Object.fromEntries(names.map((name) => [name, `var(--${name})`]));

export default {
  content: ['./src/**/*.{html,svelte,ts}'],
  darkMode: ['selector', '[data-theme="dark"]'],
  theme: {
    // The palette is closed: a colour that is not a token does not compile to anything.
    colors: { ...colors, transparent: 'transparent', current: 'currentColor', inherit: 'inherit' },
    fontFamily: {
      sans: ['"Source Sans 3 Variable"', '"Source Sans 3"', 'system-ui', 'sans-serif'],
      serif: ['"Source Serif 4 Variable"', '"Source Serif 4"', 'Georgia', 'serif'],
      mono: ['"JetBrains Mono Variable"', '"JetBrains Mono"', 'ui-monospace', 'monospace']
    },
    fontSize: {
      xs: ['0.75rem', '1rem'],
      sm: ['0.8125rem', '1.125rem'],
      base: ['0.9375rem', '1.375rem'],
      lg: ['1.0625rem', '1.625rem'],
      xl: ['1.25rem', '1.75rem'],
      '2xl': ['1.5rem', '1.875rem'],
      '3xl': ['1.875rem', '2.25rem'],
      figure: ['2.125rem', '2.375rem']
    },
    borderRadius: { none: '0', DEFAULT: '4px', full: '9999px' },
    extend: {
      maxWidth: { prose: '74ch', page: '76rem' },
      // A finger needs 44 px; a mouse does with less.
      minHeight: { touch: '2.75rem' },
      minWidth: { touch: '2.75rem' }
    }
  },
  plugins: [themes]
} satisfies Config;
