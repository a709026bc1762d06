import type { ProvenanceInput } from '../../../../views/provenance';
import type { InjectionAmount } from '../../../amounts/injection-amount';
import type { Reported } from '../../../amounts/types';
import { sentence } from '../figure-parts';
import type { StudyPanelEntry } from '../study-data';
import type { StudyFigures } from '../study-figures';
import { input } from './parts';

/** Where in its run a number was measured, leading to the sequence; nothing where the import kept no sequence of it. */
export function injectionInput(figures: StudyFigures, reported: Reported): ProvenanceInput[] {
  const { runs } = figures.checks();
  const found = runs.find(({ run }) => run.injections.some(({ id }) => id === reported.injectionId));
  if (!found) return [];
  const place = found.run.injections.findIndex(({ id }) => id === reported.injectionId) + 1;
  return [
    input('Place in its sequence', `${place} of ${found.run.injections.length}`, '', {
      href: `/studies/${figures.data.code}/calibration/sequences/${found.run.id}#injection-${reported.injectionId}`
    })
  ];
}

/** What the checks of the sequence say against the injections an amount was formed from, each rule with its document. */
export function injectionSentences(
  figures: StudyFigures,
  entry: StudyPanelEntry,
  used: readonly InjectionAmount[]
): string[] {
  const checks = figures.checks();
  const several = used.length > 1;
  return used.flatMap((item) => {
    const reported = 'trace' in item ? item.trace.reported : item.reported;
    return checks
      .flagsOf(reported.injectionId, entry.id)
      .map(({ text, rule }) =>
        sentence(
          `${several ? `injection ${reported.injection} is flagged` : 'its injection is flagged'}: ${text}; ${rule.citation}`
        )
      );
  });
}
