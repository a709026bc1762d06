import { expect, it } from 'vitest';
import { orderMassBalance, type MassBalanceOrder } from '../../../src/lib/charts/mass-balance-order';
import { balanceRow } from './fixtures';

const rows = [
  balanceRow('Caffeine', {}, { verdict: 'inside', open: 20, class: 'neutral' }),
  balanceRow('Metformin', {}, { verdict: 'outside', open: 10, class: 'base' }),
  balanceRow('Phenol', {}, { verdict: null, open: null, class: 'phenol' }),
  balanceRow('NDMA', {}, { verdict: 'outside', open: 30, class: 'amine' }),
  balanceRow('Aniline', {}, { verdict: 'watch', open: 5, class: 'amine' }),
  balanceRow('Diuron', {}, { verdict: 'too few', open: 0, class: 'neutral' })
];

it.each<[MassBalanceOrder, string]>([
  ['verdict', 'NDMA Metformin Aniline Diuron Phenol Caffeine'],
  ['open', 'NDMA Caffeine Metformin Aniline Diuron Phenol'],
  ['name', 'Aniline Caffeine Diuron Metformin NDMA Phenol'],
  ['class', 'Aniline NDMA Metformin Caffeine Diuron Phenol'],
  ['panel', 'Caffeine Metformin Phenol NDMA Aniline Diuron']
])('orders by %s', (order, names) => {
  const before = rows.map(({ name }) => name);
  expect(orderMassBalance(Object.freeze([...rows]), order).map(({ name }) => name)).toEqual(names.split(' '));
  expect(rows.map(({ name }) => name)).toEqual(before);
});
