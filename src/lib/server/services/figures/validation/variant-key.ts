import type { ValidationContext } from './context';

/** How a figure's address names the variant it is of; '-' where it is of all. */
export function variantKey({ variant }: Pick<ValidationContext, 'variant'>): string {
  return variant?.code ?? '-';
}
