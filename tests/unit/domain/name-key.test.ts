import { describe, expect, it } from 'vitest';
import { nameKey, parseCas } from '../../../src/lib/domain/name-key';

describe('nameKey', () => {
  it.each([
    ['α-HCH', 'alpha-HCH'],
    ['Benzo[a]pyrene', 'benzo(a)pyrene'],
    ['S 4', 's4'],
    ['S-4', 'S4'],
    ['N‑Nitroso dimethylamine', 'N-nitrosodimethylamine'],
    ['p,p′-DDE', "p,p'-DDE"],
    ['p,p´-DDE', "p,p'-DDE"],
    ['Elution_1', 'elution 1'],
    ['Elution\u00a01', 'Elution 1'],
    ['Café', 'cafe'],
    ['NO₃', 'NO3'],
    ['Ω', 'omega']
  ])('takes %s and %s for one name', (one, other) => {
    expect(nameKey(one)).toBe(nameKey(other));
  });

  it.each([
    ['S1-2', 'S12'],
    ['1 2', '12'],
    ["2,2'-dimethyl", '2,2-dimethyl'],
    ['1,12-diol', '11,2-diol'],
    ['(+)-menthol', '(−)-menthol'],
    ['S1.2', 'S12'],
    ['6:2 FTS', '62 FTS'],
    ['atrazine', 'atrazine-d5']
  ])('keeps %s and %s apart', (one, other) => {
    expect(nameKey(one)).not.toBe(nameKey(other));
  });

  it('is its own key, so that a stored key compares with a fresh one', () => {
    for (const text of ['α-HCH', 'S1-2', 'Benzo[a]pyrene', '6:2 FTS']) {
      expect(nameKey(nameKey(text))).toBe(nameKey(text));
    }
  });

  it('has nothing for a text of separators only', () => {
    expect(nameKey(' - – ')).toBe('');
  });
});

describe('parseCas', () => {
  // Water, formaldehyde and caffeine: numbers from the published registry, from memory; the rule is the registry's check digit.
  it.each([
    ['7732-18-5', '7732-18-5'],
    ['CAS 50-00-0', '50-00-0'],
    ['cas no.: 58–08–2', '58-08-2'],
    [' 58 - 08 - 2 ', '58-08-2']
  ])('reads %s', (text, number) => {
    expect(parseCas(text)).toBe(number);
  });

  it.each(['7732-18-4', '58-08-3', '58082', 'caffeine', '', '2026-12-01', '58-08-2 and more'])(
    'refuses %s',
    (text) => {
      expect(parseCas(text)).toBeNull();
    }
  );
});
