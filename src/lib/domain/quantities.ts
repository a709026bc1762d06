import { create, unitDependencies } from 'mathjs';
import { readNumber, type NumberReading } from './numbers';

// Typed as if it could be missing.
const math = create({ unitDependencies: unitDependencies ?? {} });

/** The units that quantities are kept in, with others of their kind that people type. */
const kept = {
  ng: { what: 'an amount', examples: 'ng, µg, mg, g' },
  mL: { what: 'a volume', examples: 'µL, mL, L' },
  g: { what: 'a mass', examples: 'mg, g, kg' },
  'ng/mL': { what: 'a concentration', examples: 'ng/mL, ng/L, µg/L, mg/L' },
  min: { what: 'a time', examples: 's, min, h' }
} as const;

export type KeptUnit = keyof typeof kept;

const micro = /[\u00b5\u03bc]/g;

/** The number and the unit of "2,5 µg/L"; the unit is '' where none was typed. */
function parted(text: string): readonly [string, string] {
  const match = /^(.*?)\s*([A-Za-z\u00b5\u03bc][A-Za-z\u00b5\u03bc/·.\s]*)$/u.exec(text);
  // "1e3" is a number, not one with the unit e3.
  return match && /\d/.test(match[1] ?? '') ? [match[1] ?? '', match[2] ?? ''] : [text, ''];
}

/** Repairs the last digits that a change of unit rounds away: 0.3 µg is 300 ng, not 299.99999999999994. */
function tidied(value: number): number {
  return Number(value.toPrecision(14));
}

/**
 * Reads a quantity as people type it ("5", "0,3 µg", "250 uL") and converts it to the unit it is kept in.
 * Without a unit the number is taken to be in that unit already.
 */
export function readQuantity(text: string, unit: KeptUnit): NumberReading {
  const [number, typedUnit] = parted(text.trim());
  const reading = readNumber(number);
  if (!reading.ok || typedUnit === '') return reading;
  const { what, examples } = kept[unit];
  const refusal: NumberReading = {
    ok: false,
    message: `'${typedUnit.trim()}' is not a unit of ${what.replace(/^an? /, '')} here. Use one of ${examples}.`
  };
  try {
    const found = math.unit(1, spelled(typedUnit));
    if (!found.equalBase(math.unit(unit))) return refusal;
    return { ok: true, value: tidied(reading.value * tidied(found.toNumber(unit))) };
  } catch {
    return refusal;
  }
}

/** The unit as the units library spells it. */
function spelled(unit: string): string {
  return unit
    .replace(micro, 'u')
    .replace(/\s+/g, '')
    .replace(/(^|\/)(\w?)l$/, (_, before: string, prefix: string) => `${before}${prefix}L`)
    .replace(/^(\w?)l\//, '$1L/');
}
