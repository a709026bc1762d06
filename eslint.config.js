import js from '@eslint/js';
import importX from 'eslint-plugin-import-x';
import svelte from 'eslint-plugin-svelte';
import globals from 'globals';
import ts from 'typescript-eslint';
import svelteConfig from './svelte.config.js';

const lib = './src/lib';
const server = `${lib}/server`;

/** The layering: which folder may import from which. */
const zones = [
  // The pure modules know nothing of the application but its vocabulary; amounts become figures through stats.
  ...['stats', 'chemistry', 'amounts'].map((pure) => ({
    target: `${server}/${pure}`,
    from: ['./src/routes', `${lib}/components`, `${lib}/schemas`, `${lib}/charts`, server],
    except: undefined,
    message: `${pure} is pure: it may import its own files and src/lib/domain only${pure === 'amounts' ? ', and stats' : ''}`
  })),
  {
    target: [`${server}/imports`, `${server}/reports`],
    from: [`${server}/db`, `${server}/services`],
    message: 'imports and reports never query'
  },
  { target: server, from: './src/routes', message: 'the server library does not know its routes' },
  {
    target: [`${lib}/components`, `${lib}/charts`, `${lib}/domain`, `${lib}/schemas`, `${lib}/views`],
    from: [server, './src/routes'],
    message: 'browser code never imports server code'
  },
  {
    target: `${lib}/domain`,
    from: [`${lib}/components`, `${lib}/charts`, `${lib}/schemas`, `${lib}/views`],
    message: 'the vocabulary depends on nothing'
  }
];

const restricted = zones.flatMap(({ target, from, message }) => {
  const targets = Array.isArray(target) ? target : [target];
  const sources = Array.isArray(from) ? from : [from];
  return targets.flatMap((t) =>
    sources.map((f) => {
      // A pure module may import itself: everything else below src/lib/server is out of bounds.
      const except =
        f === server && t.startsWith(`${server}/`)
          ? [`./${t.slice(server.length + 1)}`, ...(t === `${server}/amounts` ? ['./stats'] : [])]
          : [];
      return { target: t, from: f, except, message };
    })
  );
});

export default ts.config(
  { ignores: ['build/', '.svelte-kit/', 'node_modules/', '.data/', 'static/', 'test-results/'] },
  js.configs.recommended,
  ...ts.configs.recommended,
  ...svelte.configs.recommended,
  {
    languageOptions: { globals: { ...globals.browser, ...globals.node } },
    plugins: { 'import-x': importX },
    settings: { 'import-x/resolver': { node: { extensions: ['.ts', '.js', '.svelte'] } } },
    rules: {
      'no-undef': 'off',
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/no-non-null-assertion': 'off',
      'import-x/no-restricted-paths': ['error', { zones: restricted }],
      'svelte/no-navigation-without-resolve': 'off',
      'svelte/require-each-key': 'error'
    }
  },
  {
    files: ['**/*.svelte', '**/*.svelte.ts'],
    languageOptions: {
      parserOptions: { extraFileExtensions: ['.svelte'], parser: ts.parser, svelteConfig }
    }
  },
  {
    // Scripts, worker and tests load the server library without the framework.
    files: ['src/lib/server/**/*.ts'],
    rules: {
      'no-restricted-imports': [
        'error',
        {
          patterns: [
            { group: ['$env/*', '$app/*'], message: 'configuration comes through src/lib/server/config.ts' }
          ]
        }
      ]
    }
  }
);
