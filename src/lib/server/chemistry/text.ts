import { givenText } from '../../domain/given-text';

/** A computed figure inside a sentence: three significant digits at most, no trailing zeros. */
export function shortText(value: number): string {
  return givenText(Number(value.toPrecision(3)));
}

/** A share that was asked for, as percent: 0.99 is "99 %". */
export function shareText(share: number): string {
  return `${givenText(Number((100 * share).toPrecision(6)))} %`;
}
