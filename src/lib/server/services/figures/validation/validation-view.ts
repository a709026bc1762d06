import type { ValidationView } from '../../../../views/validation';
import type { Link } from '../addresses';
import type { StudyVariant } from '../study-data';
import type { StudyFigures } from '../study-figures';
import { subjectOf } from '../subject';
import { blanksPart } from './blanks-part';
import { confirmationPart } from './confirmation-part';
import { validationContext } from './context';
import { controlPart } from './control-part';
import { demonstrationPart } from './demonstration-part';
import { detectionPart } from './detection-part';
import { duplicatesPart } from './duplicates-part';
import { horwitzPart } from './horwitz-part';
import { matrixPart } from './matrix-part';
import { precisionPart } from './precision-part';

/** The variant whose validation is meant where nobody names one: the last that was measured; null: the study has none. */
export function usualVariant(figures: StudyFigures): StudyVariant | null {
  return subjectOf(figures, {}).context?.variant ?? figures.data.variants[0] ?? null;
}

/** The validation of a study, part by part: page, API, CSV and summary render this one view. */
export function validationOf(
  figures: StudyFigures,
  variant: StudyVariant | null,
  link: Link
): ValidationView {
  const { data } = figures;
  const context = validationContext(figures, variant);
  return {
    study: data.code,
    variant: variant && { code: variant.code, name: variant.name },
    variants: data.variants.map(({ code, name }) => ({ code, name })),
    criteria: `${data.criteriaSet.name}, version ${data.criteriaSet.version}`,
    parts: [
      demonstrationPart(context, link),
      confirmationPart(context, link),
      detectionPart(context, link),
      precisionPart(context, link),
      matrixPart(context, link),
      blanksPart(context, link),
      controlPart(context, link),
      duplicatesPart(context, link),
      horwitzPart(context, link)
    ]
  };
}
