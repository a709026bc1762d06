import { describe, expect, it } from 'vitest';
import { fractionSlots, slotLook } from '../../../src/lib/charts/fraction-slots';
import { fractionKinds, type FractionKind } from '../../../src/lib/domain/vocabulary';

describe('fractionSlots', () => {
  it.each<[readonly FractionKind[], readonly number[]]>([
    [
      ['elution', 'second elution', 'second cartridge', 'aqueous layer'],
      [0, 1, 2, 3]
    ],
    [
      ['elution', 'aqueous layer'],
      [0, 3]
    ],
    [
      ['elution', 'elution', 'aqueous layer'],
      [0, 1, 3]
    ],
    [
      ['elution', 'elution', 'second elution'],
      [0, 2, 1]
    ]
  ])('gives %j the slots %j', (kinds, slots) => {
    expect(fractionSlots(kinds)).toEqual(slots);
  });

  it('gives a kind the same slot whatever stands beside it', () => {
    for (const kind of fractionKinds)
      expect(fractionSlots([kind])[0]).toBe(fractionSlots([...fractionKinds])[fractionKinds.indexOf(kind)]);
  });
});

it('tells a repeated colour by a texture on screen', () => {
  expect(slotLook(1)).toMatchObject({ colour: 2, repeated: false });
  expect(slotLook(7)).toMatchObject({ colour: 2, repeated: true });
});
