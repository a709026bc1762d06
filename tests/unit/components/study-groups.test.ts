import { expect, it } from 'vitest';
import { currentItem, type NavigationGroup } from '../../../src/lib/components/shell/study-groups';

const groups: readonly NavigationGroup[] = [
  { group: 'Overview', items: [{ href: '/studies/1', label: 'Stages' }] },
  {
    group: 'Bench',
    items: [
      { href: '/studies/1/experiments', label: 'Experiments' },
      { href: '/studies/1/data', label: 'Data in' }
    ]
  }
];

it.each([
  ['/studies/1', 'Stages'],
  ['/studies/1/experiments', 'Experiments'],
  ['/studies/1/experiments/7', 'Experiments'],
  ['/studies/1/data-packages', 'Stages'],
  ['/studies/12', null]
])('marks at %s the item %s', (path, label) => {
  expect(currentItem(groups, path)?.label ?? null).toBe(label);
});
