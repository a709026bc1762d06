import type { PlannedPhView } from '../../../views/panel-chemistry';
import type { VariantView } from '../../../views/variants';

/** Steps that bring the sample to a pH at which analytes are taken up. */
const uptake: ReadonlySet<string> = new Set(['load', 'partition']);

/** The pH values at which the variants take their analytes up, from low to high, each with the variants that do. */
export function plannedPhs(
  variants: readonly Pick<VariantView, 'code' | 'name' | 'steps'>[]
): readonly PlannedPhView[] {
  const found = new Map<number, { code: string; name: string }[]>();
  for (const { code, name, steps } of variants) {
    const own = steps.flatMap(({ kind, parameters }) =>
      uptake.has(kind) && parameters.ph !== undefined ? [parameters.ph] : []
    );
    for (const ph of new Set(own)) found.set(ph, [...(found.get(ph) ?? []), { code, name }]);
  }
  return [...found].map(([ph, taking]) => ({ ph, variants: taking })).sort((a, b) => a.ph - b.ph);
}

/**
 * The pH that a study's chemistry is read at when nobody asks for another: that of the variant that the findings show
 * first (`preferred`), else that of the last variant with one, else 7.
 */
export function defaultPh(
  planned: readonly PlannedPhView[],
  variantCodes: readonly string[],
  preferred: string | null
): { readonly ph: number; readonly variant: string | null } {
  const phOf = (code: string): number | undefined =>
    planned.findLast(({ variants }) => variants.some((variant) => variant.code === code))?.ph;
  const order = [...(preferred === null ? [] : [preferred]), ...[...variantCodes].reverse()];
  for (const code of order) {
    const ph = phOf(code);
    if (ph !== undefined) return { ph, variant: code };
  }
  return { ph: 7, variant: null };
}
