import { figureText } from '../../../../domain/figure-text';
import type { ValidationPart } from '../../../../views/validation';
import { commonVolume, preparationsOf } from '../../../amounts/validation/preparations';
import { horrat, horwitzRsd } from '../../../stats';
import type { Link } from '../addresses';
import { column, figure, percent, worstFirst } from './cells';
import type { ValidationContext } from './context';
import { publishedRules } from './published-rules';
import { variantKey } from './variant-key';

/** ng/L: below this Horwitz' curve was never meant to be used. */
const appliesFrom = 1000;

/** Horwitz and HorRat, where the level is one that they speak of; below it the reason why they are absent. */
export function horwitzPart(context: ValidationContext, link: Link): ValidationPart {
  const levels = context.figures.targets.flatMap((entry) => {
    const preparations = preparationsOf(context.settings('precision'), entry.id, ['spiked']);
    const volume = commonVolume(preparations);
    const { components } = context.precision(entry);
    const spikes = preparations.flatMap(({ portion }) => (portion.spikeNg === null ? [] : [portion.spikeNg]));
    if (volume === null || spikes.length === 0 || !components) return [];
    const ngPerL = (1000 * spikes.reduce((sum, ng) => sum + ng, 0)) / spikes.length / volume;
    return [{ entry, ngPerL, components }];
  });
  const applies = levels.filter(({ ngPerL }) => ngPerL >= appliesFrom);
  const lowest = Math.min(...levels.map(({ ngPerL }) => ngPerL));
  const rows = applies.map(({ entry, ngPerL, components }) => {
    // 1 ng/L of water is 1e-12 of its mass.
    const share = ngPerL * 1e-12;
    const predicted = horwitzRsd(share);
    const { repeatabilityRsd: within, intermediateRsd: over } = components;
    return {
      key: entry.id,
      panelEntryId: entry.id,
      name: entry.name,
      href: link({ kind: 'precision', variant: variantKey(context), entry: entry.id }),
      verdict: null,
      why: '',
      worst: over,
      cells: [
        figure(ngPerL),
        percent(predicted),
        percent(within),
        percent(over),
        figure(within === null ? null : horrat(within, share)),
        figure(over === null ? null : horrat(over, share))
      ]
    };
  });
  return {
    key: 'horwitz',
    title: 'Horwitz and HorRat',
    meaning: [
      applies.length > 0
        ? 'How the scatter compares with what laboratories were found to differ by at that level. Both ratios are of one laboratory, so they are expected to lie below what is asked of several.'
        : levels.length > 0
          ? `Not applied. Horwitz' curve tells what laboratories differ by at levels from about 1 µg/L up; at ${figureText(lowest)} ng/L it predicts so wide a scatter that any result would look good.`
          : 'Not applied: no precision over batches with a sample volume is known, so there is no level to hold against it.'
    ],
    evidence: null,
    rests: applies.length > 0 ? ['The experiments of repeatability and intermediate precision.'] : [],
    rules: [],
    beside: [publishedRules.horwitz],
    missing: [],
    notes:
      applies.length > 0 && applies.length < levels.length
        ? [`${levels.length - applies.length} analytes lie below 1 µg/L and are left out.`]
        : [],
    tables:
      rows.length > 0
        ? [
            {
              key: 'horwitz',
              caption: 'Scatter beside what Horwitz predicts',
              judged: false,
              columns: [
                column('level', 'Level', 'ng/L'),
                column('predicted', 'Horwitz', '%'),
                column('within', 'Repeatability', '%'),
                column('over', 'Intermediate', '%'),
                column('ratio-within', 'HorRat, repeatability'),
                column('ratio-over', 'HorRat, intermediate')
              ],
              rows: worstFirst(rows)
            }
          ]
        : [],
    charts: [],
    pairs: [],
    pairChoices: [],
    counts: { inside: 0, watch: 0, outside: 0, 'too few': 0 }
  };
}
