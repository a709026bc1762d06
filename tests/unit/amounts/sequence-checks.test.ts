import { describe, expect, it } from 'vitest';
import { hour, makeRuns, rule, usualRules } from './sequence-numbers';

const day = Date.parse('2026-03-04T08:00:00Z');
const kindsOf = (made: ReturnType<typeof makeRuns>, at = 0): string[] =>
  made.checks.runs[at]?.sets.flatMap(({ gaps }) => gaps.map(({ kind }) => kind)) ?? [];

describe('a continuing check', () => {
  // 8000D: % drift = 100 (found - nominal)/nominal; an area of 6350 on 100 per ng/mL is 63.5 of 50 ng/mL, a drift of 27 %.
  it('reads 100 found/nominal by the line of its set, 100 more than the drift', () => {
    const { checks } = makeRuns([{ words: 'L L L L C127 E C' }]);
    const reading = checks.runs[0]?.sets[0]?.readings.find(({ entryId }) => entryId === 'a');
    expect(reading).toMatchObject({ nominal: 50, state: 'fails' });
    expect(reading?.found).toBeCloseTo(63.5, 10);
    expect((reading?.percent ?? 0) - 100).toBeCloseTo(27, 10);
  });

  it.each([
    ['C80', false],
    ['C120', false],
    ['C79', true],
    ['C121', true]
  ])('holds from 80 to 120 %%, ends included: %s', (word, fails) => {
    expect(makeRuns([{ words: `L L L L ${word} E C` }]).flagged()).toEqual([fails]);
  });

  it('flags the extracts on both its sides, up to the next check, and one analyte only', () => {
    const made = makeRuns([{ words: 'L L L L E C E E C127 E E C E C' }]);
    expect(made.flagged('a')).toEqual([false, true, true, true, true, false]);
    expect(made.flagged('b')).toEqual([false, false, false, false, false, false]);
    const [flag] = made.checks.flagsOf('1.7', 'a');
    expect(flag).toMatchObject({ cause: 'check', side: 'after', rule: { type: 'continuing check' } });
    expect(flag?.text).toBe(
      'the continuing check after it, CCV at 16:00, read a at 127 % of its concentration (80 to 120 % asked for)'
    );
  });

  it('that fails first flags back to the levels, whose own extracts lie before it', () => {
    expect(makeRuns([{ words: 'L L L L E E C60 E C' }]).flagged()).toEqual([true, true, true]);
  });

  it('two in a row that fail flag both brackets and what lies between', () => {
    expect(makeRuns([{ words: 'L L L L E C130 E C130 E C E C' }]).flagged()).toEqual([
      true,
      true,
      true,
      false
    ]);
  });

  it('fails as a whole where more analytes fail than may, and then flags them all', () => {
    const strict = [rule('continuing check', 80, 120), rule('analytes failing a check', null, 20)];
    const made = makeRuns([{ words: 'L L L L E C127 E C' }], strict);
    // One of two is 50 %, of which 20 % may.
    expect(made.flagged('b')).toEqual([true, true]);
    expect(made.checks.flagsOf('1.5', 'b')[0]?.cause).toBe('check as a whole');
    expect(makeRuns([{ words: 'L L L L E C127 E C' }]).flagged('b')).toEqual([false, false]);
  });

  it('has a rule of its own where it is the last of its run', () => {
    const closing = [...usualRules, rule('closing check', 50, 150)];
    expect(makeRuns([{ words: 'L L L L C E C140' }], closing).flagged()).toEqual([false]);
    expect(makeRuns([{ words: 'L L L L C E C140 E C' }], closing).flagged()).toEqual([true, true]);
  });

  it('flags nothing without a rule, and says what it read', () => {
    const made = makeRuns([{ words: 'L L L L C190 E C190' }], []);
    expect(made.flagged()).toEqual([false]);
    expect(made.checks.runs[0]?.sets[0]?.readings.map(({ state }) => state)).toContain('unheld');
  });
});

describe('what a run does not show', () => {
  it('a run without a closing check is a gap and flags nothing', () => {
    const made = makeRuns([{ words: 'L L L L C E E' }]);
    expect(made.flagged()).toEqual([false, false]);
    expect(kindsOf(made)).toEqual(['not closed']);
    expect(made.checks.runs[0]?.sets[0]?.gaps[0]?.injectionIds).toEqual(['1.6', '1.7']);
  });

  it('extracts before any check or level are a gap', () => {
    expect(kindsOf(makeRuns([{ words: 'E C E C' }]))).toEqual(['not opened']);
  });

  it('a run without any check is one gap', () => {
    expect(kindsOf(makeRuns([{ words: 'L L L L E E' }]))).toEqual(['no check']);
  });

  it('the levels or the second source open a run as a check does', () => {
    expect(kindsOf(makeRuns([{ words: 'S E C' }]))).toEqual([]);
    expect(kindsOf(makeRuns([{ words: 'L L L L E C' }]))).toEqual([]);
  });

  it('too long a wait since the check before is said with its rule', () => {
    const made = makeRuns(
      [{ words: 'C E E E C' }],
      [...usualRules, { ...rule('time between checks', null, 2), unit: 'h' }]
    );
    const [gap] = made.checks.runs[0]?.sets[0]?.gaps ?? [];
    expect(gap).toMatchObject({ kind: 'interval', injectionIds: ['1.4'] });
    expect(gap?.text).toBe(
      'One extract was run 3.0 h after the check before it; at most 2 h may lie between.'
    );
  });

  it('no second source is said of the set', () => {
    expect(makeRuns([{ words: 'L L L L C E C' }]).checks.setGaps.get('one')?.[0]?.kind).toBe(
      'no second source'
    );
    expect(makeRuns([{ words: 'L L L L S C E C' }]).checks.setGaps.get('one')).toEqual([]);
  });
});

describe('runs', () => {
  it('without times stand in the order of the file, and say so', () => {
    const made = makeRuns([{ words: 'L L L L C E C127 E C', startsAt: null }]);
    expect(made.checks.runs[0]?.run.orderedBy).toBe('file');
    expect(made.flagged()).toEqual([true, true]);
    expect(kindsOf(made)).toEqual(['order of the file']);
  });

  it('of two days never bracket each other', () => {
    const made = makeRuns([{ words: 'L L L L C E E' }, { words: 'C127 E C', startsAt: day + 48 * hour }]);
    expect(made.checks.runs).toHaveLength(2);
    expect(made.flagged()).toEqual([false, false, true]);
  });

  it('a vial that a later file brings anew keeps its place between the checks of its day', () => {
    // Read anew at 14:30: between the check of 14:00, which fails, and that of 16:00.
    const made = makeRuns([{ words: 'L L L L C E C127 E C' }, { words: 'E', startsAt: day + 6.5 * hour }]);
    expect(made.checks.runs).toHaveLength(1);
    expect(made.flagged()).toEqual([true, true, true]);
  });

  it('of two sets on two instruments at the same time stay apart', () => {
    const made = makeRuns([
      { words: 'L L L L C127 E C', setId: 'one', instrument: 'Instrument 1' },
      { words: 'L L L L C E C', setId: 'two', instrument: 'Instrument 2', startsAt: day }
    ]);
    expect(made.checks.runs).toHaveLength(2);
    expect(made.flagged()).toEqual([true, false]);
  });

  it('two sets in one file are bracketed each by its own checks', () => {
    const made = makeRuns([
      { words: 'L L L L C E C', setId: 'one', startsAt: day },
      { words: 'L L L L C127 E C', setId: 'two', startsAt: day + 20 * 60_000 }
    ]);
    expect(made.flagged()).toEqual([false, true]);
  });
});

describe('the second source', () => {
  it('outside its rule flags its analyte in everything the set reads, before and after, in every run', () => {
    const made = makeRuns([{ words: 'L L L L E S140 C E C' }, { words: 'C E C' }]);
    expect(made.flagged('a')).toEqual([true, true, true]);
    expect(made.flagged('b')).toEqual([false, false, false]);
    expect(made.checks.flagsOf('1.8', 'a')[0]?.cause).toBe('second source');
  });

  it('the latest one decides', () => {
    expect(makeRuns([{ words: 'L L L L S140 S C E C' }]).flagged()).toEqual([false]);
    expect(makeRuns([{ words: 'L L L L S S140 C E C' }]).flagged()).toEqual([true]);
  });
});

describe('an instrument blank', () => {
  it('over its limit flags the extracts after it, up to the next blank', () => {
    // Half of the lowest level (10 ng/mL) by common practice: 80 % is over it, 40 % is not.
    const made = makeRuns([{ words: 'L L L L C E B80 E C E B E C' }]);
    expect(made.flagged('a')).toEqual([false, true, true, false]);
    expect(made.checks.flagsOf('1.8', 'a')[0]).toMatchObject({
      cause: 'blank',
      rule: { citation: 'common practice, no source' }
    });
    expect(makeRuns([{ words: 'L L L L C B40 E C' }]).flagged()).toEqual([false]);
    expect(
      makeRuns(
        [{ words: 'L L L L C B40 E C' }],
        [...usualRules, rule('instrument blank', null, 30)]
      ).flagged()
    ).toEqual([true]);
  });
});
