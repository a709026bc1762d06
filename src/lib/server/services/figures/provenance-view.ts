import { NotFound } from '../../errors';
import type { ProvenanceView } from '../../../views/provenance';
import type { FigureAddress, Link } from './addresses';
import { amountProvenance } from './provenance/amount';
import { calibrationProvenance } from './provenance/calibration';
import { matrixProvenance, relativeProvenance, surrogateProvenance } from './provenance/portions';
import { fractionProvenance, recoveryProvenance } from './provenance/recovery';
import { lossProvenance, openProvenance } from './provenance/stages';
import { duplicateProvenance, validationProvenance } from './provenance/validation';
import type { StudyFigures } from './study-figures';
import { experimentByNumber, variantByCode } from './subject';

/**
 * Where a figure comes from, one level of it, with links to the next.
 * @throws NotFound for an address that points at nothing in this study
 */
export function provenanceOf(figures: StudyFigures, address: FigureAddress, link: Link): ProvenanceView {
  const entry = figures.entries.get(address.entry);
  if (!entry) throw new NotFound();
  switch (address.kind) {
    case 'demonstration':
    case 'confirmation':
    case 'detection':
    case 'precision':
    case 'blanks':
    case 'control':
      return validationProvenance(figures, address, entry, link);
    case 'duplicate':
      return orNotFound(duplicateProvenance(figures, address.pair, entry, link));
  }
  if (address.kind === 'loss' || address.kind === 'open') {
    const context = figures.variant(variantByCode(figures, address.variant));
    const view =
      address.kind === 'loss'
        ? lossProvenance(figures, context, address.stage, entry, link)
        : openProvenance(figures, context, entry, link);
    return orNotFound(view);
  }
  const experiment = experimentByNumber(figures, address.experiment);
  switch (address.kind) {
    case 'recovery':
      return recoveryProvenance(figures, experiment, entry, link);
    case 'fraction':
      return orNotFound(fractionProvenance(figures, experiment, entry, address.fraction, link));
    case 'amount':
      return orNotFound(amountProvenance(figures, experiment, entry, address, link));
    case 'calibration':
      return calibrationProvenance(figures, experiment, entry, link);
    case 'surrogate':
      return surrogateProvenance(figures, experiment, entry, link);
    case 'relative':
      return relativeProvenance(figures, experiment, entry, link);
    case 'matrix':
      return matrixProvenance(figures, experiment, entry);
  }
}

function orNotFound<Thing>(thing: Thing | null): Thing {
  if (thing === null) throw new NotFound();
  return thing;
}
