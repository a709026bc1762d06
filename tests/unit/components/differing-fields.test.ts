import { expect, test } from 'vitest';
import { differingFields } from '../../../src/lib/components/planning/differing-fields';

test('only what was typed otherwise than it is stored is shown, with both', () => {
  const typed = { title: 'Mine', matrix: ' lake ', version: '1', 'fractions.0.countsAs': 'method' };
  const stored = {
    title: 'Theirs',
    matrix: 'lake',
    version: '2',
    'fractions.0.countsAs': 'balance',
    note: 'new'
  };
  expect(differingFields(typed, stored, { title: 'Title' })).toEqual([
    { key: 'title', label: 'Title', stored: 'Theirs', typed: 'Mine' },
    { key: 'fractions.0.countsAs', label: 'fractions 1 counts as', stored: 'balance', typed: 'method' },
    { key: 'note', label: 'note', stored: 'new', typed: '' }
  ]);
});
