import { describe, expect, it } from 'vitest';
import { sequenceChecks } from '../../../src/lib/server/amounts/sequence-checks';
import type { SequenceInjection, SequenceInput } from '../../../src/lib/server/amounts/sequence-types';
import { area, entry, levelArea, panelOf } from './numbers';
import { rule, usualRules } from './sequence-numbers';

/*
 * One analyte read against one internal standard at 50 ng/mL in two levels (areas 900 and 1100, so a mean of 1000, or 20 per ng/mL), a check, and
 * three extracts of 1 mL. The mean of the calibration is what 8270E and 625.1 hold areas to: 50 to 200 %.
 */
type Extract = { readonly standardArea: number; readonly volumeMl?: number; readonly dilution?: number };

function made(
  extracts: readonly Extract[],
  options: {
    readonly point?: 'vial' | 'extract';
    readonly checkArea?: number;
    readonly rules?: readonly ReturnType<typeof rule>[];
  } = {}
) {
  const { point = 'vial', checkArea = 1000, rules = usualRules } = options;
  const standard = { internalEntryId: 'is' };
  const injections: SequenceInjection[] = [];
  const inject = (id: string, subject: SequenceInjection['subject'], dilution = 1): void => {
    injections.push({
      id,
      sequenceId: 's',
      position: injections.length + 1,
      number: 1,
      dilution,
      runAt: null,
      subject
    });
  };
  inject('l1', { kind: 'level', calibrationSetId: 'set', levelId: 'l1' });
  inject('l2', { kind: 'level', calibrationSetId: 'set', levelId: 'l2' });
  inject('c', { kind: 'check', checkStandardId: 'ccv' });
  extracts.forEach(({ volumeMl = 1, dilution = 1 }, index) =>
    inject(
      `e${index}`,
      {
        kind: 'extract',
        experimentId: 'x',
        replicateId: `r${index}`,
        fractionId: null,
        finalVolumeMl: volumeMl
      },
      dilution
    )
  );
  inject('last', { kind: 'check', checkStandardId: 'ccv' });
  // y = q on both levels: an area equal to the standard's reads as much as the standard.
  const level = (id: string, concentration: number, standardArea: number) =>
    levelArea('a', id, (standardArea * concentration) / 50, {
      ...standard,
      injectionId: id,
      internalArea: standardArea
    });
  const check = (injectionId: string, standardArea: number) => ({
    ...area('a', 'r', null, standardArea, { ...standard, injectionId, internalArea: standardArea }),
    checkStandardId: 'ccv'
  });
  const input: SequenceInput = {
    panel: panelOf(
      entry({ id: 'a', internalStandardId: 'is' }),
      entry({ id: 'is', role: 'injection internal standard' })
    ),
    sets: [
      {
        id: 'set',
        name: 'Set',
        defaultModel: 'average response factor',
        defaultWeighting: 'none',
        levels: [
          {
            id: 'l1',
            number: 1,
            label: 'L1',
            concentrations: new Map([
              ['a', 10],
              ['is', 50]
            ])
          },
          {
            id: 'l2',
            number: 2,
            label: 'L2',
            concentrations: new Map([
              ['a', 100],
              ['is', 50]
            ])
          }
        ],
        choices: new Map(),
        reported: [level('l1', 10, 900), level('l2', 100, 1100)]
      }
    ],
    experiments: [
      {
        id: 'x',
        number: 1,
        title: 'x',
        stageKind: 'loss',
        subtract: 'none',
        calibrationSetId: 'set',
        fractions: [],
        replicates: [],
        spikes: [],
        replicateSpikes: [],
        additions: [
          point === 'vial'
            ? { entryId: 'is', point, amountNg: null, concentrationNgPerMl: 50 }
            : { entryId: 'is', point, amountNg: 50, concentrationNgPerMl: null }
        ],
        exclusions: [],
        reported: extracts.map(({ standardArea }, index) =>
          area('a', `r${index}`, null, 500, {
            ...standard,
            injectionId: `e${index}`,
            internalArea: standardArea
          })
        )
      }
    ],
    checkStandards: [
      {
        id: 'ccv',
        calibrationSetId: 'set',
        kind: 'continuing',
        label: 'CCV',
        source: '',
        note: '',
        concentrations: new Map([['a', 50]])
      }
    ],
    checkReported: [check('c', checkArea), check('last', 1000)],
    sequences: [{ id: 's', importId: 'import-1', instrument: 'Instrument 1', runOn: null }],
    injections,
    rules
  };
  const checks = sequenceChecks(input);
  const percentIn = (id: string) =>
    checks.runs[0]?.sets[0]?.areas.find(({ injectionId }) => injectionId === id);
  return { checks, percentIn };
}

describe('the area of an internal standard', () => {
  it('is held to percent of its mean over the levels, ends included', () => {
    const { checks, percentIn } = made([
      { standardArea: 500 },
      { standardArea: 499 },
      { standardArea: 2001 }
    ]);
    expect(percentIn('e0')?.percentOfCalibration).toBeCloseTo(50, 10);
    expect(percentIn('l1')?.percentOfCalibration).toBeCloseTo(90, 10);
    expect(['e0', 'e1', 'e2'].map((id) => checks.flagsOf(id, 'a').length)).toEqual([0, 1, 1]);
    expect(checks.flagsOf('e1', 'a')[0]).toMatchObject({
      cause: 'internal standard',
      side: 'itself',
      rule: { type: 'internal standard area' }
    });
    expect(checks.flagsOf('e1', 'a')[0]?.text).toBe(
      'the area of is in it is 49.9 % of its mean over the levels (50 to 200 % asked for)'
    );
  });

  it('counts by its concentration where an addition to the whole extract ends up thinner', () => {
    // 50 ng in 4 mL, diluted twofold: 6.25 ng/mL, an eighth of the levels', so that an area of 125 is all of it.
    const { percentIn, checks } = made([{ standardArea: 125, volumeMl: 4, dilution: 2 }], {
      point: 'extract'
    });
    expect(percentIn('e0')?.percentOfCalibration).toBeCloseTo(100, 10);
    expect(checks.flagsOf('e0', 'a')).toEqual([]);
  });

  it('is held to the latest check that holds, where a rule says so', () => {
    const rules = [...usualRules, rule('internal standard area against the latest check', 70, 130)];
    const { percentIn, checks } = made([{ standardArea: 600 }, { standardArea: 1200 }], {
      checkArea: 800,
      rules
    });
    expect(percentIn('e0')?.percentOfCheck).toBeCloseTo(75, 10);
    expect(percentIn('e1')?.percentOfCheck).toBeCloseTo(150, 10);
    expect(checks.flagsOf('e0', 'a')).toEqual([]);
    expect(checks.flagsOf('e1', 'a')[0]?.rule.type).toBe('internal standard area against the latest check');
  });

  it('outside its window in a check makes what is read against it fail, however well it reads', () => {
    const { checks } = made([{ standardArea: 1000 }], { checkArea: 400 });
    const reading = checks.runs[0]?.sets[0]?.readings.find(({ injectionId }) => injectionId === 'c');
    expect(reading?.percent).toBeCloseTo(100, 10);
    expect(reading).toMatchObject({ state: 'fails', rule: { type: 'internal standard area' } });
    expect(checks.flagsOf('e0', 'a').map(({ cause, side }) => `${cause} ${side}`)).toEqual(['check before']);
  });

  it('is taken to be in a check as in the levels, which all hold it alike', () => {
    const { checks } = made([{ standardArea: 1000 }]);
    expect(checks.runs[0]?.sets[0]?.readings[0]).toMatchObject({ state: 'holds', why: null });
  });
});
