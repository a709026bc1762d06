import { studentizedRangeUpper } from '../../src/lib/server/stats/studentized-range';
import { noncentralUpper } from '../../src/lib/server/stats/noncentral-t';
import { fisherUpper, normalQuantile, studentTwoSided } from '../../src/lib/server/stats/distributions';
import {
  chiSquareQuantile,
  chiSquareUpperQuantile,
  fisherQuantile,
  studentQuantile
} from '../../src/lib/server/stats/quantiles';
import * as stats from '../../src/lib/server/stats/index';
import type { Estimate, Interval, Observation } from '../../src/lib/server/stats/index';
import { insectSprays, npk, plantGrowth, sleep, toothGrowth, warpbreaks } from './data/r-datasets';

type Figure = number | null;

/** The figures that reference.R computes, formed by this module, under the same names. */
export function figuresAgainstR(): Map<string, Figure> {
  const figures = new Map<string, Figure>();
  const put = (name: string, value: Figure | readonly Figure[]) => {
    if (!Array.isArray(value)) figures.set(name, value as Figure);
    else value.forEach((part: Figure, i) => figures.set(`${name}.${i + 1}`, part));
  };
  distributions(put);
  descriptions(put);
  comparisons(put);
  designs(put);
  planning(put);
  calibrations(put);
  losses(put);
  validation(put);
  return figures;
}

type Put = (name: string, value: Figure | readonly Figure[]) => void;

const bounds = (ci: Interval | null): Figure[] => [ci?.lower ?? null, ci?.upper ?? null];
const whole = (e: Estimate): Figure[] => [e.estimate, e.se, e.df, ...bounds(e.ci)];
/** %g of C for the numbers used in the names. */
const g = (value: number) =>
  value < 1e-4 ? value.toExponential().replace(/e-(\d)$/, 'e-0$1') : String(value);

function distributions(put: Put): void {
  for (const df of [1, 2.5, 3, 7, 30.25, 400]) {
    for (const p of [0.4, 0.025, 0.005, 1e-6]) {
      put(`qt upper ${g(p)} df ${df}`, studentQuantile(p, df));
      put(`qchisq lower ${g(p)} df ${df}`, chiSquareQuantile(p, df));
      put(`qchisq upper ${g(p)} df ${df}`, chiSquareUpperQuantile(p, df));
    }
    for (const t of [0.01, 1.5, 6, 40]) put(`pt two-sided t ${t} df ${df}`, studentTwoSided(t, df));
  }
  for (const df2 of [2, 9.5, 120]) {
    for (const df1 of [1, 5]) {
      for (const p of [0.5, 0.01]) put(`qf upper ${p} df ${df1} ${df2}`, fisherQuantile(p, df1, df2));
      for (const f of [0.2, 4, 60]) put(`pf upper ${f} df ${df1} ${df2}`, fisherUpper(f, df1, df2));
    }
  }
  for (const p of [0.5, 0.1, 0.001, 1e-12]) put(`qnorm upper ${g(p)}`, normalQuantile(p));
  for (const t of [2, 4.5]) {
    for (const df of [4, 18]) {
      for (const d of [0.5, 3]) put(`pt noncentral t ${t} df ${df} delta ${d}`, noncentralUpper(t, df, d));
    }
  }
  for (const k of [2, 3, 6, 10]) {
    for (const df of [30, 60, 120]) put(`ptukey q 3.5 k ${k} df ${df}`, studentizedRangeUpper(3.5, k, df));
  }
}

const recoveries = [78.4, 91.2, 85.5, 88.1, 80.9, 95.3];
const other = [70.2, 74.8, 69.9, 77.3];

function descriptions(put: Put): void {
  for (const level of [0.9, 0.95, 0.99]) {
    const d = stats.describe(recoveries, level);
    put(`describe ci ${level}`, bounds(d.ci));
    put(`describe sdCi ${level}`, bounds(d.sdCi));
    put(`describe rsdCi ${level}`, bounds(d.rsdCi));
  }
  const d = stats.describe(recoveries);
  put('describe mean sd', [d.mean, d.sd]);
}

function comparisons(put: Put): void {
  const w = stats.welch(recoveries, other);
  put('welch', [w.t, w.df, w.p, ...bounds(w.ci)]);
  const o = stats.oneSampleT(recoveries, 100);
  put('oneSampleT', [o.t, o.p, ...bounds(o.ci)]);
  const e = stats.tost(recoveries, other, 20);
  put('tost', [e.pLower, e.pUpper, ...bounds(e.ci)]);
  const s = stats.welch(sleep[0]!, sleep[1]!);
  put('welch sleep', [s.t, s.df, s.p]);
  const lengths = (supp: string) => toothGrowth.filter((o) => o.levels.supp === supp).map((o) => o.response);
  const t = stats.welch(lengths('OJ'), lengths('VC'));
  put('welch ToothGrowth', [t.t, t.df, t.p]);

  const p = [0.04, 0.001, 0.3, 0.02, 0.02, 0.9, 0.0004];
  put('holm', stats.holm(p));
  put('benjaminiHochberg', stats.benjaminiHochberg(p));

  for (const [name, groups] of [
    ['InsectSprays', insectSprays],
    ['PlantGrowth', plantGrowth]
  ] as const) {
    const a = stats.oneWayAnova(groups);
    put(`oneWay ${name}`, [a.between.ss, a.within.ss, a.f, a.p]);
    const b = stats.brownForsythe(groups);
    put(`brownForsythe ${name}`, [b.f, b.p]);
  }
  // R takes the later group less the earlier one.
  const tukey = (groups: readonly (readonly number[])[], a: number, b: number): Figure[] => {
    const pair = stats.tukeyKramer(groups).find((entry) => entry.a === a && entry.b === b)!;
    return [-pair.difference, -pair.ci.upper, -pair.ci.lower, pair.p];
  };
  put('tukey InsectSprays F-A', tukey(insectSprays, 0, 5));
  put('tukey InsectSprays E-C', tukey(insectSprays, 2, 4));
  put('tukey InsectSprays D-B', tukey(insectSprays, 1, 3));
  put('tukey PlantGrowth trt2-trt1', tukey(plantGrowth, 1, 2));
}

function designs(put: Put): void {
  const plots = stats.factorialAnova(npk);
  put('npk ss', [plots.block!.ss, ...plots.terms.map((term) => term.ss), plots.residual.ss]);
  put('npk p', plots.terms.map((term) => term.p).slice(0, 6));
  const warp = stats.factorialAnova(warpbreaks);
  const column = (key: 'ss' | 'f' | 'p') => warp.terms.map((term) => term[key]);
  put('warpbreaks', [...column('ss'), warp.residual.ss, ...column('f'), ...column('p')]);
  const cell = warp.means.find((mean) => mean.levels.join() === 'A,L')!;
  put('cell mean A L', [cell.mean, ...bounds(cell.ci)]);

  const without = (data: readonly Observation[], rows: readonly number[]) =>
    data.filter((_, i) => !rows.includes(i + 1));
  const gaps = stats.factorialAnova(without(warpbreaks, [3, 4, 20, 37]));
  put(
    'typeII ss',
    gaps.terms.map((term) => term.ss)
  );
  put(
    'typeII f',
    gaps.terms.map((term) => term.f)
  );
  put(
    'typeII p',
    gaps.terms.map((term) => term.p)
  );
  put('typeII residual', [gaps.residual.ss, gaps.residual.df, gaps.r2]);
  const blocked = stats.factorialAnova(
    without(toothGrowth, [1, 12, 13, 44, 45, 60]).map((o, i) => ({ ...o, block: String((i + 1) % 3) }))
  );
  put('typeII block', [
    blocked.block!.ss,
    ...blocked.terms.map((term) => term.ss),
    blocked.residual.ss,
    blocked.residual.df
  ]);
}

function planning(put: Put): void {
  // n values whose largest deviation is not near the limit: only the limit is compared.
  const series = (n: number) => Array.from({ length: n }, (_, i) => i);
  for (const n of [4, 6, 10, 20]) {
    put(`grubbs critical n ${n}`, [
      stats.grubbs(series(n)).critical,
      stats.grubbs(series(n), { alpha: 0.01, side: 'high' }).critical
    ]);
  }
  for (const k of [3, 5, 9]) {
    for (const n of [2, 3]) {
      const groups = series(k).map(() => series(n));
      put(`cochran critical k ${k} n ${n}`, stats.cochran(groups).critical);
    }
  }
  for (const n of [3, 6, 20]) {
    for (const difference of [0.5, 1, 2]) {
      put(`power n ${n} delta ${difference}`, stats.powerTwoSample({ difference, sd: 1, n }));
      put(
        `power one-sided n ${n} delta ${difference}`,
        stats.powerTwoSample({ difference, sd: 1, n, sides: 1 })
      );
    }
  }
  put('replicates difference 10 sd 10', stats.replicatesForDifference({ difference: 10, sd: 10 }));
  put(
    'replicates difference 15 sd 10 power 0.9',
    stats.replicatesForDifference({ difference: 15, sd: 10, power: 0.9 })
  );
  put(
    'replicates half width',
    [4, 8, 15].map((halfWidth) => stats.replicatesForHalfWidth({ sd: 12, halfWidth }))
  );
  put(
    'replicates rsd',
    [8, 12, 16].map((rsd) => stats.replicatesForRsd({ rsd, limit: 20 }))
  );
}

const responses = [0.0212, 0.0395, 0.1018, 0.2071, 0.399, 0.985, 1.912];
const points = [1, 2, 5, 10, 20, 50, 100].map((x, i) => ({ x, y: responses[i]! }));

function calibrations(put: Put): void {
  for (const model of ['linear', 'quadratic'] as const) {
    for (const weighting of ['none', '1/x', '1/x2'] as const) {
      const fit = stats.fitCalibration(points, { model, weighting });
      const name = `calibration ${model} ${weighting}`;
      put(`${name} coefficients`, fit.coefficients);
      put(`${name} standard errors`, fit.standardErrors);
      put(`${name} sigma r2`, [fit.residualSd, fit.r2]);
      put(`${name} covariance last`, fit.covariance[0]!.at(-1)!);
      put(`${name} rse`, fit.rse);
      const solved = stats.solveCalibration(fit, 0.3, { replicates: 3 });
      put(`${name} solve 0.3 of 3`, [solved.x, solved.se]);
    }
  }
  const average = stats.fitCalibration(points, { model: 'average response factor', weighting: 'none' });
  put('calibration average', [
    average.coefficients[0]!,
    average.standardErrors[0]!,
    average.residualSd,
    average.responseFactorRsd
  ]);
}

const signal = [99.1, 101.8, 97.6];
const evaporation = [60.3, 57.9, 61.5, 59.2];
const drying = [54.8, 52.7, 55.9, 53.1];
const extraction = [27.4, 25.1, 29.8, 26.6, 28.3];

function losses(put: Put): void {
  const values = [182, 195, 204, 188, 199, 192];
  const native = [98, 107, 101];
  put('netMean', whole(stats.netMean({ values, native })));
  const matrixEffect = { key: 'm', estimate: 80, se: 4, df: 8 };
  put('netMean matrix effect', whole(stats.netMean({ values, native, matrixEffect })).slice(0, 3));
  const batches = ['1', '1', '1', '2', '2', '2'];
  const batched = stats.netMean({ values, native, batches, nativeBatches: ['1', '2', '2'] });
  put('netMean batches', whole(batched).slice(0, 3));

  const rows = stats.stageLosses([
    { stage: 'instrument', kind: 'signal', values: signal },
    { stage: 'evaporation', values: evaporation },
    { stage: 'drying', values: drying },
    { stage: 'extraction', values: extraction }
  ]);
  for (const k of [1, 2, 3]) {
    put(`step recovery ${k}`, whole(rows[k]!.stepRecovery));
    put(`lost ${k}`, whole(rows[k]!.lost!));
    put(`regain ${k}`, rows[k]!.regain);
  }
  put(
    'stage p',
    rows.slice(1).map((row) => row.p)
  );
  put(
    'stage p holm',
    rows.slice(1).map((row) => row.pAdjusted)
  );
  put('stage p against 100', stats.stageLosses([{ stage: 'evaporation', values: evaporation }])[0]!.p);

  const keyed = (key: string, list: readonly number[]) => ({ key, values: list });
  const s = keyed('s', signal);
  const e = keyed('e', evaporation);
  const d = keyed('d', drying);
  const x = keyed('x', extraction);
  put(
    'forecast',
    whole(
      stats.forecastRecovery([
        { to: e, from: s },
        { to: x, from: d }
      ])
    )
  );
  const cancelling = stats.forecastRecovery([
    { to: e, from: s },
    { to: d, from: e }
  ]);
  put('forecast cancelling', whole(cancelling).slice(0, 3));

  const wash = [11.4, 14.2, 9.8, 12.3];
  const open = stats.openLoss({
    replicates: [61.2, 58.4, 63.9, 60.1].map((elution, i) => ({ elution, wash: wash[i]! })),
    fractions: [
      { name: 'elution', passed: ['drying', 'evaporation'] },
      { name: 'wash', passed: ['drying'] }
    ],
    stepRecoveries: {
      drying: { estimate: 0.9, se: 0.03, df: 6, ci: null },
      evaporation: { estimate: 0.8, se: 0.05, df: 4, ci: null }
    },
    reference: { estimate: 97, se: 1.5, df: 5, ci: null }
  });
  put('openLoss downstream', whole(open.downstream).slice(0, 3));
  put('openLoss open', whole(open.open).slice(0, 3));

  const effect = stats.matrixEffect({
    neat: [1020, 998, 1011, 1005],
    postSpiked: [842, 871, 855],
    preSpiked: [690, 655, 702, 671, 688],
    native: [52, 61, 47]
  });
  put('matrixEffect matrixEffect', whole(effect.matrixEffect));
  put('matrixEffect recovery', whole(effect.recovery));
  put('matrixEffect processEfficiency', whole(effect.processEfficiency));
}

function validation(put: Put): void {
  const days = [
    [92.1, 94.3, 93.2],
    [88.7, 90.2],
    [95.4, 96.1, 94.9, 95.8],
    [91.3, 92.2, 90.8]
  ];
  const c = stats.precisionComponents(days);
  put('precision', [c.mean, c.repeatabilitySd, c.betweenSd, c.intermediateSd, c.f, c.p]);

  // Values with an SD of exactly 1, so that the limits are the factors.
  const unitSd = (n: number) => {
    const series = Array.from({ length: n }, (_, i) => i);
    const { sd } = stats.describe(series);
    return series.map((value) => value / sd!);
  };
  for (const n of [7, 8, 10, 21]) {
    put(`qt 0.99 n ${n}`, stats.methodDetectionLimit({ spiked: unitSd(n) }).fromSpiked);
  }
  for (const n of [5, 6, 7, 8, 10]) {
    put(
      `half range factor n ${n}`,
      stats.quantitationConfirmation({ values: unitSd(n), fortified: 1 }).halfRange
    );
  }
}
