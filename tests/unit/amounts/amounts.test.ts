import { describe, expect, it } from 'vitest';
import { amountsOf } from '../../../src/lib/server/amounts/experiment-amounts';
import type { CalibrationSet, ExperimentData } from '../../../src/lib/server/amounts/types';
import { area, entry, experiment, levelArea, panelOf, replicate, straightLine } from './numbers';

/*
 * Every expected value below is worked by hand in the comment beside it, from the equations of the trade:
 * external m = x DF V/a; internal standard in the vial m = q c_is DF V/a; in the whole extract m = q m_is/a;
 * ng/mL in the vial m = x DF V/a; ng/L m = c V_sample/1000.
 */

const atrazine = entry({ id: 'atrazine' });
const external = panelOf(atrazine);

const standard = entry({ id: 'standard', role: 'injection internal standard' });
const corrected = entry({ id: 'corrected', internalStandardId: 'standard' });
const internal = panelOf(corrected, standard);

/**
 * Levels of 10, 20, 50, 100 ng/mL, each with 40 ng/mL of the standard whose area is 8000: q = 0.25, 0.5, 1.25, 2.5. Areas 2000 q, so
 * area ratio = 2000 q/8000 = 0.25 q.
 */
function ratioLine(override: Partial<CalibrationSet> = {}): CalibrationSet {
  const levels = [10, 20, 50, 100];
  return straightLine([], {
    levels: levels.map((concentration, index) => ({
      id: `level-${index + 1}`,
      number: index + 1,
      label: `L${index + 1}`,
      concentrations: new Map([
        ['corrected', concentration],
        ['standard', 40]
      ])
    })),
    reported: levels.map((concentration, index) =>
      levelArea('corrected', `level-${index + 1}`, (2000 * concentration) / 40, {
        internalArea: 8000,
        internalEntryId: 'standard'
      })
    ),
    ...override
  });
}

const against = { internalArea: 10_000, internalEntryId: 'standard' };

function ngOf(data: ExperimentData, panel: typeof external, set: CalibrationSet | null, id: string): number {
  const { amount } = amountsOf(data, panel, set).at(id, 'S1', 'elution');
  if (amount.state !== 'amount') throw new Error(JSON.stringify(amount));
  return amount.ng;
}

describe('an area by external calibration', () => {
  it('becomes x times dilution times volume over the share', () => {
    // A = 5000 at 100 per ng/mL: x = 50 ng/mL. V = 0.5 mL, DF = 4, a = 0.8: m = 50 x 4 x 0.5/0.8 = 125 ng.
    const data = experiment({
      reported: [
        area('atrazine', 'S1', 'elution', 5000, { finalVolumeMl: 0.5, dilution: 4, aliquotShare: 0.8 })
      ]
    });
    expect(ngOf(data, external, straightLine(['atrazine']), 'atrazine')).toBeCloseTo(125, 9);
  });

  it('needs a final volume and says so', () => {
    const data = experiment({ reported: [area('atrazine', 'S1', 'elution', 5000, { finalVolumeMl: null })] });
    const { amount } = amountsOf(data, external, straightLine(['atrazine'])).at('atrazine', 'S1', 'elution');
    expect(amount).toMatchObject({ state: 'refused', reason: expect.stringContaining('final volume') });
  });

  it('uses the fit revision in force, with the levels it leaves out', () => {
    // Level 4 is made to read double; with it left out the line is 100 per ng/mL again: 3000 -> 30 ng/mL x 1 mL = 30 ng.
    const line = straightLine(['atrazine']);
    const spoilt = line.reported.map((item) =>
      item.levelId === 'level-4' ? { ...item, value: 20_000 } : item
    );
    const choice = {
      fitId: 'fit-2',
      revision: 2,
      model: 'linear',
      weighting: '1/x',
      levelsLeftOut: ['level-4']
    } as const;
    const data = experiment({ reported: [area('atrazine', 'S1', 'elution', 3000)] });
    const chosen = { ...line, reported: spoilt, choices: new Map([['atrazine', choice]]) };
    expect(ngOf(data, external, chosen, 'atrazine')).toBeCloseTo(30, 9);
    const [used] = amountsOf(data, external, chosen).at('atrazine', 'S1', 'elution').used;
    expect(used && 'trace' in used && used.trace.calibration?.choice.fitId).toBe('fit-2');
    expect(ngOf(data, external, { ...line, reported: spoilt }, 'atrazine')).not.toBeCloseTo(30, 1);
  });

  it('is flagged where it was read below the lowest level', () => {
    // 500 -> 5 ng/mL, below the lowest level of 10: 5 ng in 1 mL, outside the calibrated range.
    const data = experiment({ reported: [area('atrazine', 'S1', 'elution', 500)] });
    const place = amountsOf(data, external, straightLine(['atrazine'])).at('atrazine', 'S1', 'elution');
    expect(place.amount).toMatchObject({ state: 'amount', ng: expect.closeTo(5, 9) });
    expect(place.notes).toContain('read below the lowest calibration level');
  });
});

describe('an area with an internal standard', () => {
  it('in the vial becomes q times its concentration times dilution times volume over the share', () => {
    // A/A_is = 2500/10000 = 0.25: q = 1. c_is = 40 ng/mL, DF = 5, V = 2 mL, a = 0.5: m = 1 x 40 x 5 x 2/0.5 = 800 ng.
    const data = experiment({
      additions: [{ entryId: 'standard', point: 'vial', amountNg: null, concentrationNgPerMl: 40 }],
      reported: [
        area('corrected', 'S1', 'elution', 2500, {
          ...against,
          finalVolumeMl: 2,
          dilution: 5,
          aliquotShare: 0.5
        })
      ]
    });
    expect(ngOf(data, internal, ratioLine(), 'corrected')).toBeCloseTo(800, 9);
  });

  it('in the whole extract takes neither volume nor dilution', () => {
    // A/A_is = 0.25: q = 1. m_is = 60 ng, a = 0.5: m = 1 x 60/0.5 = 120 ng, whatever the volume and the dilution.
    const of = (finalVolumeMl: number | null, dilution: number): number =>
      ngOf(
        experiment({
          additions: [{ entryId: 'standard', point: 'extract', amountNg: 60, concentrationNgPerMl: null }],
          reported: [
            area('corrected', 'S1', 'elution', 2500, {
              ...against,
              finalVolumeMl,
              dilution,
              aliquotShare: 0.5
            })
          ]
        }),
        internal,
        ratioLine(),
        'corrected'
      );
    expect(of(2, 5)).toBeCloseTo(120, 9);
    expect(of(null, 1)).toBeCloseTo(120, 9);
  });

  it('is refused when it was recorded against another standard than the panel now says', () => {
    const other = entry({ id: 'other', name: 'Another standard', role: 'injection internal standard' });
    const data = experiment({
      additions: [{ entryId: 'standard', point: 'extract', amountNg: 60, concentrationNgPerMl: null }],
      reported: [area('corrected', 'S1', 'elution', 2500, { internalArea: 9000, internalEntryId: 'other' })]
    });
    const { amount } = amountsOf(data, panelOf(corrected, standard, other), ratioLine()).at(
      'corrected',
      'S1',
      'elution'
    );
    expect(amount).toMatchObject({ state: 'refused', reason: expect.stringContaining('Another standard') });
  });

  it('is refused when its standard has no area, no concentration at the levels, or was added in an unknown amount', () => {
    const additions = [
      { entryId: 'standard', point: 'extract', amountNg: 60, concentrationNgPerMl: null }
    ] as const;
    const reasonOf = (data: ExperimentData, set: CalibrationSet): string => {
      const { amount } = amountsOf(data, internal, set).at('corrected', 'S1', 'elution');
      return 'reason' in amount ? amount.reason : amount.state;
    };
    const bare = [area('corrected', 'S1', 'elution', 2500)];
    const measured = [area('corrected', 'S1', 'elution', 2500, against)];
    expect(reasonOf(experiment({ additions, reported: bare }), ratioLine())).toContain(
      'no area of its internal standard'
    );
    const unknown = ratioLine().levels.map((level) => ({
      ...level,
      concentrations: new Map([['corrected', 10]])
    }));
    expect(reasonOf(experiment({ additions, reported: measured }), ratioLine({ levels: unknown }))).toContain(
      'no concentration of standard'
    );
    expect(reasonOf(experiment({ reported: measured }), ratioLine())).toContain('does not say how much');
  });
});

describe('a reported amount', () => {
  const reportedAs = (basis: 'vial' | 'ng' | 'ng_per_l', value: number): number =>
    ngOf(
      experiment({
        replicates: [replicate('S1', { sampleVolumeMl: 500 })],
        reported: [
          area('atrazine', 'S1', 'elution', value, {
            basis,
            finalVolumeMl: 2,
            dilution: 3,
            aliquotShare: 0.6
          })
        ]
      }),
      external,
      null,
      'atrazine'
    );

  it('in ng/mL in the vial takes dilution, volume and share', () => {
    // 10 ng/mL x 3 x 2 mL/0.6 = 100 ng.
    expect(reportedAs('vial', 10)).toBeCloseTo(100, 9);
  });
  it('in ng of the whole fraction takes none of them', () => expect(reportedAs('ng', 42)).toBe(42));
  it('in ng/L takes the sample volume alone', () => {
    // 80 ng/L x 500 mL/1000 = 40 ng.
    expect(reportedAs('ng_per_l', 80)).toBeCloseTo(40, 9);
  });
});

describe('not detected', () => {
  const place = (override: Parameters<typeof area>[4]) =>
    amountsOf(
      experiment({
        reported: [area('atrazine', 'S1', 'elution', null, { finalVolumeMl: 0.5, dilution: 2, ...override })]
      }),
      external,
      straightLine(['atrazine'])
    ).at('atrazine', 'S1', 'elution').amount;

  it('with a limit holds that limit as an amount', () => {
    // "<1500" as an area: 15 ng/mL x 2 x 0.5 mL = 15 ng.
    const amount = place({ state: 'below', limit: 1500, rawText: '<1500' });
    expect(amount).toMatchObject({ state: 'not detected', belowNg: expect.closeTo(15, 9) });
  });

  it('without one takes the lowest calibration level', () => {
    // Lowest level 10 ng/mL x 2 x 0.5 mL = 10 ng.
    expect(place({ state: 'not detected' })).toEqual({ state: 'not detected', belowNg: 10 });
  });

  it('without one and without a level is refused', () => {
    expect(place({ state: 'not detected', basis: 'ng' })).toMatchObject({ state: 'refused' });
  });

  it('is something else than an empty cell', () => {
    expect(place({ state: 'missing', rawText: '' })).toMatchObject({ state: 'missing' });
  });
});

describe('several injections of one extract', () => {
  const place = (...injections: Parameters<typeof area>[]) =>
    amountsOf(
      experiment({ reported: injections.map((given) => area(...given)) }),
      external,
      straightLine(['atrazine'])
    ).at('atrazine', 'S1', 'elution');

  it('are averaged, and count as one portion', () => {
    // 4000 and 5000 -> 40 and 50 ng/mL in 1 mL: 45 ng.
    const found = place(
      ['atrazine', 'S1', 'elution', 4000],
      ['atrazine', 'S1', 'elution', 5000, { injection: 2 }]
    );
    expect(found.amount).toMatchObject({ state: 'amount', ng: expect.closeTo(45, 9) });
  });

  it('leave a result above range unusable until one was diluted', () => {
    const above = ['atrazine', 'S1', 'elution', 25_000] as const;
    expect(place([...above]).amount).toMatchObject({ state: 'above range' });
    // A repeat at the same dilution that happens to read in range would be chosen by chance: it does not help.
    expect(place([...above], ['atrazine', 'S1', 'elution', 9900, { injection: 2 }]).amount.state).toBe(
      'above range'
    );
    // Diluted 10-fold: 2600 -> 26 ng/mL x 10 = 260 ng.
    const diluted = place([...above], ['atrazine', 'S1', 'elution', 2600, { injection: 2, dilution: 10 }]);
    expect(diluted.amount).toMatchObject({ state: 'amount', ng: expect.closeTo(260, 9) });
    expect(diluted.notes.join()).toContain('diluted 10-fold');
  });

  it('count the least diluted one in range', () => {
    const found = place(
      ['atrazine', 'S1', 'elution', 5000],
      ['atrazine', 'S1', 'elution', 1200, { injection: 2, dilution: 5 }]
    );
    expect(found.amount).toMatchObject({ ng: expect.closeTo(50, 9) });
  });

  it('that disagree about whether there is anything are bracketed', () => {
    const found = place(
      ['atrazine', 'S1', 'elution', 1500],
      ['atrazine', 'S1', 'elution', null, { state: 'not detected', injection: 2 }]
    );
    expect(found.amount).toEqual({ state: 'not detected', belowNg: expect.closeTo(15, 9) });
  });
});
