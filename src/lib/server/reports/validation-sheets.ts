import type { ValidationView } from '../../views/validation';
import type { ReportCell } from './sheet-writer';
import type { ReportSheet } from './summary-sheets';
import { evidenceText, validationLines } from './validation-lines';

const standings = {
  seen: 'read in the document',
  memory: 'from memory, to be verified before use',
  own: 'set by the lab'
} as const;

/** What each part of the validation means, rests on, is held against and lacks. */
export function validationEvidenceSheet(view: ValidationView, origin: string): ReportSheet {
  const of = view.variant ? `Variant ${view.variant.code}, ${view.variant.name}` : null;
  return {
    name: 'Validation',
    note: `What each part of the validation rests on${of ? `; ${of}` : ''}`,
    columns: [
      { head: 'Part', width: 30 },
      { head: '', width: 14 },
      { head: 'What is said', width: 110 }
    ],
    rows: view.parts.flatMap((part): ReportCell[][] => {
      const line = (what: string, text: string): ReportCell[] => [
        { value: part.title, href: `${origin}/studies/${view.study}/validation#${part.key}` },
        what,
        text
      ];
      return [
        ...part.meaning.map((text) => line('Means', text)),
        ...(part.evidence
          ? [
              line('Rests on', evidenceText(part.evidence) || 'nothing yet'),
              line('Why these', part.evidence.sentence)
            ]
          : []),
        ...part.rests.map((text) => line('Rests on', text)),
        ...part.rules.map((rule) =>
          line(
            'Held against',
            `${rule.what} ${rule.limits}: ${rule.citation}; ${standings[rule.standing]}${rule.note ? `. ${rule.note}` : ''}`
          )
        ),
        ...part.missing.map((text) => line('Missing', text)),
        ...part.notes.map((text) => line('Note', text)),
        ...part.pairs.map(({ experiment, labels, reason, by }) =>
          line(
            'Duplicates',
            `${labels.join(' and ')} of experiment ${experiment}, declared by ${by}: ${reason}`
          )
        )
      ];
    })
  };
}

/** Every figure of the validation, one a row, unrounded. */
export function validationFiguresSheet(view: ValidationView): ReportSheet {
  return {
    name: 'Validation figures',
    note: 'Figures of the validation, one a row, unrounded; the name opens where the figure comes from',
    columns: [
      { head: 'Part', width: 30 },
      { head: 'Table', width: 44 },
      { head: 'Analyte', width: 24 },
      { head: 'Figure', width: 20 },
      { head: 'Value', width: 16, format: '0.0###' },
      { head: 'Unit', width: 14 },
      { head: 'Verdict', width: 11 },
      { head: 'Why', width: 60 },
      { head: 'Rests on', width: 34 }
    ],
    rows: validationLines(view).map((line): ReportCell[] => [
      line.part,
      line.table,
      { value: line.name, href: line.href },
      line.figure,
      line.value,
      line.unit,
      line.verdict,
      line.why,
      line.evidence
    ])
  };
}
