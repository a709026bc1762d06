import type { ValidationPart } from '../../../../views/validation';
import type { Verdict } from '../../../../views/verdict';
import type { Detection } from '../../../amounts/validation/detection';
import { isCorrectedForLosses } from '../../../amounts/practice';
import type { Link } from '../addresses';
import { column, coverageText, figure, leftOut, notesOver, textColumn, words, worstFirst } from './cells';
import type { ValidationContext } from './context';
import { partOf } from './part';
import { publishedRules } from './published-rules';
import { representative } from './representative';
import { variantKey } from './variant-key';

/** The method detection limit by 40 CFR 136 Appendix B, and beside it what the calibration says of the instrument alone. */
export function detectionPart(context: ValidationContext, link: Link): ValidationPart {
  const { figures } = context;
  const { targets } = figures;
  const all = targets.map((entry) => context.detection(entry));
  // A column holds one unit: where one analyte cannot be told per litre, all are written in ng.
  const perLitre = all.length > 0 && all.every(({ unit }) => unit === 'ng/L');
  const rows = targets.map((entry) => {
    const found = context.detection(entry);
    const line = context.calibrationLimit(entry);
    const factor = found.unit === 'ng/L' && !perLitre ? found.ngPerUnit : 1;
    const inUnit = (value: number | null): number | null =>
      value === null || factor === null ? null : value * factor;
    const ratio =
      found.mdl !== null && found.mdl > 0 && found.spike !== null ? found.spike / found.mdl : null;
    const ng = found.mdl === null || found.ngPerUnit === null ? null : found.mdl * found.ngPerUnit;
    return {
      key: entry.id,
      panelEntryId: entry.id,
      name: entry.name,
      href: link({ kind: 'detection', variant: variantKey(context), entry: entry.id }),
      verdict: detectionVerdict(found),
      why: detectionWhy(found),
      worst: ratio === null ? null : Math.abs(Math.log(ratio / Math.sqrt(20))),
      cells: [
        words(`${found.countedSpiked.length} + ${found.countedBlanks.length}`),
        figure(inUnit(found.spike)),
        figure(inUnit(found.fromSpiked)),
        figure(inUnit(found.fromBlanks)),
        figure(inUnit(found.mdl)),
        ...(perLitre ? [figure(ng)] : []),
        figure(ratio),
        figure(line.available ? (perLitre ? line.lodNgPerL : line.lodNg) : null),
        ...(perLitre ? [figure(line.available ? line.loqNgPerL : null)] : [])
      ]
    };
  });
  const shown = representative(targets, (entry) => context.detection(entry).countedSpiked.length);
  const of = shown && context.detection(shown);
  const unit = perLitre ? 'ng/L' : 'ng';
  return partOf(context, 'detection', {
    meaning: [
      'The method detection limit (MDL) is the smallest amount that can be told from a method blank with 99 % confidence, all steps of the method included: the larger of MDLs, from the scatter of preparations spiked near it, and MDLb, from the method blanks. It says that something is there, not how much.',
      'Beside it stands what the calibration line gives (3.3 and 10 times the residual SD at its lowest level, over the slope). That is the instrument alone: it knows nothing of losses, of blanks or of the matrix, and a line over a wide range makes it too large. It is never taken for the MDL.',
      'Only what a person set aside is left out; no result is dropped because it looks odd.'
    ],
    rests: of
      ? [
          coverageText('spiked preparation', of.spikedCoverage),
          coverageText('method blank', of.blankCoverage)
        ]
      : [],
    rules: publishedRules.detection,
    beside: [publishedRules.fromCalibration],
    missing: of
      ? missingOf(of)
      : [
          'Seven preparations spiked at 2 to 10 times the expected limit and seven method blanks, over three batches on three dates.'
        ],
    notes: notesOver(
      targets.flatMap((entry) => detectionNotes(context, entry).map((note) => [entry.name, note] as const)),
      targets.length
    ),
    tables: [
      {
        key: 'detection',
        caption: `Method detection limits, ${perLitre ? 'ng/L of sample' : 'ng in the preparation'}; n spiked + blanks`,
        judged: true,
        columns: [
          textColumn('n', 'n'),
          column('spike', 'Spike', unit),
          column('mdls', 'MDLs', unit),
          column('mdlb', 'MDLb', unit),
          column('mdl', 'MDL', unit),
          ...(perLitre ? [column('ng', 'MDL', 'ng')] : []),
          column('ratio', 'Spike / MDL'),
          column('lod', '3.3 σ/b', unit),
          ...(perLitre ? [column('loq', '10 σ/b', unit)] : [])
        ],
        rows: worstFirst(rows)
      }
    ]
  });
}

export function detectionVerdict(found: Detection): Verdict {
  if (found.mdl === null) return found.tooFew ? 'too few' : 'outside';
  return found.conditions.every(({ holds }) => holds) ? 'inside' : 'watch';
}

export function detectionWhy(found: Detection): string {
  if (found.mdl === null) return found.refusal ?? '';
  return found.conditions
    .filter(({ holds }) => !holds)
    .map(({ what, found: how }) => `${what}: ${how}`)
    .join('; ');
}

/** What is to be known beside one analyte's limit. */
export function detectionNotes(
  context: ValidationContext,
  entry: Parameters<ValidationContext['detection']>[0]
): string[] {
  const found = context.detection(entry);
  const relative = context
    .settings('detection')
    .some(({ amounts }) => isCorrectedForLosses(amounts.experiment, entry, amounts.panel));
  const split = found.countedBlanks.filter(
    ({ found: sum }) => sum.state === 'amount' && sum.notDetectedIn.length > 0
  ).length;
  return [
    ...leftOut([...found.spiked, ...found.blanks]),
    ...(relative
      ? ['read against a standard that was extracted along with it, so the results are corrected for losses']
      : []),
    ...(split > 0
      ? ['in some blanks one fraction held it and another did not; what was not detected counts as zero']
      : []),
    ...(found.countedBlanks.length > 100
      ? [
          'more than 100 blanks: the procedure lets their 99th percentile stand for MDLb; here mean + t s is used'
        ]
      : [])
  ];
}

function missingOf({ conditions, spikedCoverage, blankCoverage }: Detection): string[] {
  const lines = conditions
    .filter(({ what, holds }) => !holds && /preparations|blanks/.test(what))
    .map(({ what, found }) => `${found} ${what}.`);
  const undated = spikedCoverage.withoutDay + blankCoverage.withoutDay;
  const oneDay = lines.some((line) => line.includes('dates of'));
  return [
    ...lines,
    ...(undated > 0
      ? [
          `A date for ${undated} preparations: record when each was extracted, or when its experiment was performed.`
        ]
      : oneDay
        ? ['Preparations without a time of extraction of their own count under the day of their experiment.']
        : [])
  ];
}
