import type { Actor } from '../../../domain/actor';
import type { FigureLinks } from '../../../views/figure-links';
import type { ProvenanceView } from '../../../views/provenance';
import { Invalid, NotFound } from '../../errors';
import { provenanceView } from '../results';

/** What the drawer beside a page shows: a level of provenance, or why an address opens nothing. */
export type OpenFigure =
  | { readonly found: true; readonly provenance: ProvenanceView; readonly closeHref: string }
  | { readonly found: false; readonly message: string; readonly closeHref: string };

/** The open figure of a page; null when none is. A wrong address spoils the drawer, not the page. */
export async function openFigure(
  actor: Actor,
  study: string,
  links: FigureLinks
): Promise<OpenFigure | null> {
  const { open, closeHref, figureLink } = links;
  if (open === null || open === '') return null;
  try {
    return { found: true, provenance: await provenanceView(actor, study, open, figureLink), closeHref };
  } catch (error) {
    if (error instanceof Invalid || error instanceof NotFound) {
      return { found: false, message: 'This address opens no figure of this study.', closeHref };
    }
    throw error;
  }
}
