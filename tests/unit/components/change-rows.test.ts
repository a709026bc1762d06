import { describe, expect, it } from 'vitest';
import { changeRows, worded } from '../../../src/lib/components/history/change-rows';
import { momentText } from '../../../src/lib/domain/moment-text';

describe('what an event changed', () => {
  it('is shown member by member, before beside after, without what stayed', () => {
    expect(
      changeRows(
        { title: 'Old', matrix: 'river water', sampleVolumeMl: 500 },
        { title: 'New', matrix: 'river water', sampleVolumeMl: 1000 }
      )
    ).toEqual([
      { name: 'title', before: 'Old', after: 'New' },
      { name: 'sample volume ml', before: '500', after: '1000' }
    ]);
  });

  it('has one side when something is new or gone', () => {
    expect(changeRows(null, { role: 'analyst' })).toEqual([{ name: 'role', before: null, after: 'analyst' }]);
    expect(changeRows({ role: 'analyst' }, null)).toEqual([{ name: 'role', before: 'analyst', after: null }]);
    expect(changeRows(null, null)).toEqual([]);
  });

  it('words lists, yes and no, zero and nested members', () => {
    expect(
      changeRows(null, { steps: [{ kind: 'load', ph: 2 }, 'dry'], isOpen: false, count: 0, empty: '' })
    ).toEqual([
      { name: 'steps', before: null, after: 'kind: load, ph: 2; dry' },
      { name: 'is open', before: null, after: 'no' },
      { name: 'count', before: null, after: '0' }
    ]);
  });

  it('takes a bare value for what it is', () => {
    expect(changeRows('a', 'b')).toEqual([{ name: 'value', before: 'a', after: 'b' }]);
  });

  it('words names written in either way', () => {
    expect(worded('criteriaSetVersionId')).toBe('criteria set version');
    expect(worded('sample_volume')).toBe('sample volume');
  });
});

describe('a moment', () => {
  it('reads the same everywhere, in UTC', () => {
    expect(momentText('2026-03-04T23:05:59.000+02:00')).toBe('4 Mar 2026, 21:05 UTC');
    expect(momentText('2026-03-04', true)).toBe('4 Mar 2026');
  });
});
