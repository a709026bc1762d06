import type { Actor } from '../../domain/actor';
import type { SummaryView } from '../../views/summary';
import { addressText } from './figures/addresses';
import { figuresOfStudy } from './figures/figures-cache';
import type { FigureLink } from './results';
import { require } from './permissions';
import { summaryOf } from './summary/summary-view';

/** The validation summary of a study as it stands now. */
export async function summaryView(actor: Actor, study: string, figureLink: FigureLink): Promise<SummaryView> {
  require(actor, 'studies.see');
  const figures = await figuresOfStudy(actor.labId, study);
  return summaryOf(figures, { name: actor.labName, isDemo: actor.labIsDemo }, (address) =>
    figureLink(addressText(address))
  );
}

/**
 * The same summary for a file that leaves the house: figures lead to the page that opens them.
 * @param origin of this installation, "https://…"
 */
export async function exportedSummary(actor: Actor, study: string, origin: string): Promise<SummaryView> {
  require(actor, 'export.any');
  return summaryView(actor, study, summaryLink(study, origin));
}

/** Opens a figure on the summary's page. */
export function summaryLink(study: string, origin = ''): FigureLink {
  return (address) =>
    `${origin}/studies/${encodeURIComponent(study)}/summary?figure=${encodeURIComponent(address).replaceAll('%3A', ':')}`;
}
