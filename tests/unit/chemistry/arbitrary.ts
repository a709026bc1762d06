import fc from 'fast-check';

/** pKa values as laboratories meet them, and some way beyond. */
export const pka = fc.double({ min: -3, max: 16, noNaN: true });
export const ph = fc.double({ min: 0, max: 14, noNaN: true });
export const groups = fc.record({
  acids: fc.array(pka, { maxLength: 5 }),
  bases: fc.array(pka, { maxLength: 5 })
});
export const share = fc.double({ min: 0.01, max: 0.999, noNaN: true });
export const plates = fc.double({ min: 1, max: 500, noNaN: true });
