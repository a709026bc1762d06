import { describe, expect, it } from 'vitest';
import * as chemistry from '../../../src/lib/server/chemistry/index';
import { ChemistryError, type ChemistryErrorCode } from '../../../src/lib/server/chemistry/index';

type NumberCall = {
  readonly name: string;
  /** Values that are finite and still impossible here. */
  readonly impossible: readonly number[];
  readonly call: (value: number) => unknown;
};

const groups = { acids: [4], bases: [9] };
const nothing = { vapourPressurePa: null, boilingPointC: null, henryPaM3Mol: null };
const estimate = { logKow: 2, groups, ph: 7, phase: 'c18', bedMassMg: 500 } as const;
const range = { low: 2, high: 9 };

/** Every number that a public function takes. */
const numbers: readonly NumberCall[] = [
  { name: 'fractionNeutral, pH', impossible: [-3, 17], call: (v) => chemistry.fractionNeutral(groups, v) },
  {
    name: 'fractionNeutral, acid',
    impossible: [-21, 51],
    call: (v) => chemistry.fractionNeutral({ acids: [4, v], bases: [] }, 7)
  },
  {
    name: 'fractionNeutral, base',
    impossible: [-21, 51],
    call: (v) => chemistry.fractionNeutral({ acids: [], bases: [v] }, 7)
  },
  {
    name: 'fractionNeutral, permanent charge',
    impossible: [0.5, 21],
    call: (permanentCharge) => chemistry.fractionNeutral({ ...groups, permanentCharge }, 7)
  },
  { name: 'chargeStates, pH', impossible: [-3, 17], call: (v) => chemistry.chargeStates(groups, v) },
  {
    name: 'chargeStates, acid',
    impossible: [99],
    call: (v) => chemistry.chargeStates({ acids: [v], bases: [] }, 7)
  },
  { name: 'chargeShares, pH', impossible: [-3, 17], call: (v) => chemistry.chargeShares(groups, v) },
  {
    name: 'chargeShares, base',
    impossible: [99],
    call: (v) => chemistry.chargeShares({ acids: [], bases: [v] }, 7)
  },
  { name: 'meanCharge, pH', impossible: [-3, 17], call: (v) => chemistry.meanCharge(groups, v) },
  {
    name: 'meanCharge, acid',
    impossible: [99],
    call: (v) => chemistry.meanCharge({ acids: [v], bases: [] }, 7)
  },
  { name: 'ionisedAcid, pKa', impossible: [99], call: (v) => chemistry.ionisedAcid(v, 7) },
  { name: 'ionisedAcid, pH', impossible: [-3, 17], call: (v) => chemistry.ionisedAcid(4, v) },
  { name: 'ionisedBase, pKa', impossible: [99], call: (v) => chemistry.ionisedBase(v, 7) },
  { name: 'ionisedBase, pH', impossible: [-3, 17], call: (v) => chemistry.ionisedBase(4, v) },
  {
    name: 'phWindows, share',
    impossible: [0, 1, 2, -1],
    call: (v) => chemistry.phWindows(groups, 'neutral', v)
  },
  {
    name: 'phWindows, low',
    impossible: [9, 10, -3],
    call: (low) => chemistry.phWindows(groups, 'neutral', 0.9, { low, high: 9 })
  },
  {
    name: 'phWindows, high',
    impossible: [2, 1, 17],
    call: (high) => chemistry.phWindows(groups, 'neutral', 0.9, { low: 2, high })
  },
  {
    name: 'phWindows, acid',
    impossible: [99],
    call: (v) => chemistry.phWindows({ acids: [v], bases: [] }, 'neutral')
  },
  {
    name: 'mostNeutral, low',
    impossible: [9, -3],
    call: (low) => chemistry.mostNeutral(groups, { low, high: 9 })
  },
  {
    name: 'mostNeutral, acid',
    impossible: [99],
    call: (v) => chemistry.mostNeutral({ acids: [v], bases: [] }, range)
  },
  { name: 'logD, log Kow', impossible: [-21, 31], call: (v) => chemistry.logD(v, groups, 7) },
  { name: 'logD, pH', impossible: [-3, 17], call: (v) => chemistry.logD(2, groups, v) },
  { name: 'logD, acid', impossible: [99], call: (v) => chemistry.logD(2, { acids: [v], bases: [] }, 7) },
  {
    name: 'breakthroughLoss, plates',
    impossible: [0, 0.5, 1e5],
    call: (v) => chemistry.breakthroughLoss(v, 1)
  },
  { name: 'breakthroughLoss, ratio', impossible: [-1, 1e13], call: (v) => chemistry.breakthroughLoss(10, v) },
  {
    name: 'breakthroughVolumeRatio, plates',
    impossible: [0, 1e5],
    call: (v) => chemistry.breakthroughVolumeRatio(v)
  },
  {
    name: 'breakthroughVolumeRatio, loss',
    impossible: [0, 1, -0.1, 5, 0.9999],
    call: (v) => chemistry.breakthroughVolumeRatio(10, v)
  },
  { name: 'lovkvistJonssonRatio', impossible: [0, 1e5], call: (v) => chemistry.lovkvistJonssonRatio(v) },
  { name: 'werkhovenGoewieRatio', impossible: [4, 1, 1e5], call: (v) => chemistry.werkhovenGoewieRatio(v) },
  { name: 'bedVolumeMl, mass', impossible: [0, -1, 1e16], call: (v) => chemistry.bedVolumeMl(v) },
  { name: 'bedVolumeMl, hold-up', impossible: [0, -1], call: (v) => chemistry.bedVolumeMl(500, v) },
  { name: 'bedVolumes, volume', impossible: [-1], call: (v) => chemistry.bedVolumes(v, 500) },
  { name: 'bedVolumes, mass', impossible: [0], call: (v) => chemistry.bedVolumes(1, v) },
  { name: 'bedCapacity, mass', impossible: [0, -1], call: (v) => chemistry.bedCapacity('c18', v) },
  { name: 'bedLoad, loaded', impossible: [-1], call: (v) => chemistry.bedLoad('c18', 500, v) },
  { name: 'bedLoad, mass', impossible: [0], call: (v) => chemistry.bedLoad('c18', v, 1) },
  {
    name: 'retentionVolumeMl, hold-up',
    impossible: [0, -1],
    call: (v) => chemistry.retentionVolumeMl(v, 10)
  },
  { name: 'retentionVolumeMl, k', impossible: [-1], call: (v) => chemistry.retentionVolumeMl(0.6, v) },
  {
    name: 'estimateBreakthrough, log Kow',
    impossible: [-21, 31],
    call: (logKow) => chemistry.estimateBreakthrough({ ...estimate, logKow })
  },
  {
    name: 'estimateBreakthrough, pH',
    impossible: [17],
    call: (ph) => chemistry.estimateBreakthrough({ ...estimate, ph })
  },
  {
    name: 'estimateBreakthrough, mass',
    impossible: [0],
    call: (bedMassMg) => chemistry.estimateBreakthrough({ ...estimate, bedMassMg })
  },
  {
    name: 'estimateBreakthrough, plates',
    impossible: [0],
    call: (plates) => chemistry.estimateBreakthrough({ ...estimate, plates })
  },
  {
    name: 'estimateBreakthrough, loss',
    impossible: [0, 1],
    call: (loss) => chemistry.estimateBreakthrough({ ...estimate, loss })
  },
  {
    name: 'estimateBreakthrough, sample',
    impossible: [0, -1],
    call: (sampleVolumeMl) => chemistry.estimateBreakthrough({ ...estimate, sampleVolumeMl })
  },
  {
    name: 'volatility, vapour pressure',
    impossible: [-1],
    call: (vapourPressurePa) => chemistry.volatility({ ...nothing, vapourPressurePa })
  },
  {
    name: 'volatility, boiling point',
    impossible: [-274, 5001],
    call: (boilingPointC) => chemistry.volatility({ ...nothing, boilingPointC })
  },
  {
    name: 'volatility, Henry',
    impossible: [-1],
    call: (henryPaM3Mol) => chemistry.volatility({ ...nothing, henryPaM3Mol })
  },
  { name: 'volatility, final volume', impossible: [-1], call: (v) => chemistry.volatility(nothing, v) },
  { name: 'boundWaterG', impossible: [0, -1], call: (v) => chemistry.boundWaterG(v) },
  {
    name: 'sampleFormat, volume',
    impossible: [0, -1],
    call: (volumeMl) => chemistry.sampleFormat({ volumeMl, suspendedSolidsMgL: 1 })
  },
  {
    name: 'sampleFormat, solids',
    impossible: [-1],
    call: (suspendedSolidsMgL) => chemistry.sampleFormat({ volumeMl: 1, suspendedSolidsMgL })
  },
  {
    name: 'bestValue, typed',
    impossible: [1e16],
    call: (value) => chemistry.bestValue({ value, source: null }, null)
  },
  {
    name: 'bestValue, predicted',
    impossible: [-1e16],
    call: (value) => chemistry.bestValue(null, { value, source: 'x' })
  },
  {
    name: 'chemistryGroups, share',
    impossible: [0, 1],
    call: (share) => chemistry.chemistryGroups([], { share })
  },
  {
    name: 'chemistryGroups, range',
    impossible: [9],
    call: (low) => chemistry.chemistryGroups([], { range: { low, high: 9 } })
  },
  {
    name: 'chemistryGroups, final volume',
    impossible: [-1],
    call: (finalVolumeMl) => chemistry.chemistryGroups([], { finalVolumeMl })
  },
  { name: 'readPasses, share', impossible: [0, 1], call: (share) => chemistry.readPasses([], range, share) },
  {
    name: 'readPasses, range',
    impossible: [9, 12],
    call: (low) => chemistry.readPasses([], { low, high: 9 })
  }
];

/** What a call throws, or a failure when it answers. */
function refusal(call: () => unknown): ChemistryError {
  try {
    const answer = call();
    expect.unreachable(`it answered ${JSON.stringify(answer)}`);
  } catch (error) {
    expect(error).toBeInstanceOf(ChemistryError);
    return error as ChemistryError;
  }
}

const isSentence = /^[A-Z0-9'].{15,}[.]$/s;

describe.each(numbers)('$name', ({ impossible, call }) => {
  it.each([NaN, Infinity, -Infinity, '7' as unknown as number, undefined as unknown as number])(
    'refuses %s',
    (value) => {
      // Left out, a value that has a default takes it.
      const hasDefault = value === undefined && !throws(() => call(value));
      if (hasDefault) return;
      const { code, message } = refusal(() => call(value));
      expect(code).toBe('non-finite-value' satisfies ChemistryErrorCode);
      expect(message).toMatch(isSentence);
    }
  );

  it('refuses what cannot be, and says what was found', () => {
    for (const value of impossible) {
      const { code, message } = refusal(() => call(value));
      expect(code).toBe('out-of-range' satisfies ChemistryErrorCode);
      expect(message).toMatch(isSentence);
      expect(message).toContain(String(value));
    }
  });
});

function throws(call: () => unknown): boolean {
  try {
    call();
    return false;
  } catch {
    return true;
  }
}

describe('words', () => {
  it.each([
    ['phWindows', () => chemistry.phWindows(groups, 'charge' as 'charged')],
    ['bedCapacity', () => chemistry.bedCapacity('sand' as 'c18', 500)],
    ['bedLoad', () => chemistry.bedLoad('sand' as 'c18', 500, 1)],
    [
      'estimateBreakthrough',
      () => chemistry.estimateBreakthrough({ ...estimate, phase: 'ion-exchange' as 'c18' })
    ],
    ['solvent', () => chemistry.solvent('')]
  ])('%s names the words there are', (_, call) => {
    const { code, message } = refusal(call);
    expect(code).toBe('unknown-name');
    expect(message).toContain('There are: ');
  });
});

it('refuses more groups than any molecule has', () => {
  const many = { acids: Array<number>(65).fill(4), bases: [] };
  for (const call of [
    chemistry.fractionNeutral,
    chemistry.chargeStates,
    chemistry.chargeShares,
    chemistry.meanCharge
  ]) {
    expect(refusal(() => call(many, 7))).toMatchObject({ code: 'too-many' });
  }
});

it('every public function is among these, or among those that are tested by themselves', () => {
  const here = new Set([...numbers.map(({ name }) => name.replace(/,.*/, '')), 'solvent']);
  const elsewhere = ['readStructure', 'drawStructure', 'neutralShareOf', 'ChemistryError'];
  const functions = Object.entries(chemistry).flatMap(([name, value]) =>
    typeof value === 'function' ? [name] : []
  );
  expect(functions.filter((name) => !here.has(name) && !elsewhere.includes(name))).toEqual([]);
});
