import { expect, it } from 'vitest';
import { filteredAddress } from '../../../src/lib/components/history/filtered-address';

it('keeps the other filters when one changes or goes', () => {
  const parameters = new URLSearchParams('actor=a b&before=40');
  expect(filteredAddress(parameters, { before: '20' })).toBe('?actor=a+b&before=20');
  expect(filteredAddress(parameters, { before: null })).toBe('?actor=a+b');
  expect(parameters.get('before')).toBe('40');
});
