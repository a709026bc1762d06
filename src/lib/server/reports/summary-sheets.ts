import { decimalsBeside } from '../../domain/figure-text';
import type { SummaryFindings, SummaryView } from '../../views/summary';
import type { ReportCell, ReportColumn } from './sheet-writer';
import { validationEvidenceSheet, validationFiguresSheet } from './validation-sheets';

/** One sheet of the validation workbook. */
export interface ReportSheet {
  readonly name: string;
  /** What the sheet holds, in a line. */
  readonly note: string;
  readonly columns: readonly ReportColumn[];
  readonly rows: readonly (readonly ReportCell[])[];
}

const text = (head: string, width = 18): ReportColumn => ({ head, width });
const figure = (head: string, format = '0.0', width = 11): ReportColumn => ({ head, width, format });

/** The sheets of a validation summary, in the order of the page. */
export function summarySheets(view: SummaryView, origin: string): ReportSheet[] {
  return [
    aboutSheet(view, origin),
    panelSheet(view),
    variantsSheet(view),
    stagesSheet(view, origin),
    resultsSheet(view),
    balanceSheet(view),
    lossesSheet(view),
    surrogatesSheet(view),
    blanksSheet(view),
    validationEvidenceSheet(view.validation, origin),
    validationFiguresSheet(view.validation),
    calibrationSheet(view),
    exclusionsSheet(view, origin),
    importsSheet(view, origin)
  ];
}

function aboutSheet(view: SummaryView, origin: string): ReportSheet {
  const { study, criteria } = view;
  const volume = study.sampleVolumeMl === null ? null : `${study.sampleVolumeMl} mL`;
  const rows: ReportCell[][] = [
    ['Study', { value: study.code, href: `${origin}/studies/${study.code}/summary` }],
    ['Title', study.title],
    ['Aim', study.objective],
    ['Matrix', study.matrix],
    ['Sample volume', volume],
    ['State', `${study.state}, revision ${study.revision}, data version ${study.dataVersion}`],
    ['Responsible', study.owner],
    ['Lab', view.lab.name],
    ['Hash of this summary', view.hash],
    ['Acceptance criteria', `${criteria.name}, version ${criteria.version}`],
    ...criteria.rules.map((rule): ReportCell[] => [
      rule.what,
      `${rule.limits}. ${rule.citation}; ${standings[rule.standing]}${rule.note ? `. ${rule.note}` : ''}`
    ]),
    ...view.lookAt.flatMap((item): ReportCell[][] =>
      item.items.length === 0
        ? [[item.title, item.none]]
        : item.items.map((entry, index): ReportCell[] => [
            index === 0 ? item.title : null,
            { value: entry.text, href: absolute(entry.href, origin) }
          ])
    ),
    ...view.cautions.map((caution, index): ReportCell[] => [index === 0 ? 'Cautions' : null, caution])
  ];
  return {
    name: 'Summary',
    note: 'What the study is about and what to look at first',
    columns: [text('', 24), text('', 110)],
    rows
  };
}

const standings = {
  seen: 'read in the document',
  memory: 'from memory, to be verified before use',
  own: 'set by the lab'
} as const;

function panelSheet(view: SummaryView): ReportSheet {
  const columns = [
    text('Analyte', 24),
    text('CAS number', 14),
    text('Role', 18),
    text('Class', 16),
    text('Internal standard', 20),
    text('Criteria', 34),
    text('Property', 20),
    text('Value', 14),
    text('Unit', 12),
    text('Source', 40)
  ];
  const rows = view.panel.flatMap((entry): ReportCell[][] => {
    const head = [entry.name, entry.cas, entry.role, entry.class, entry.internalStandard, entry.criteria];
    if (entry.properties.length === 0) return [head];
    return entry.properties.map((item) => [...head, item.label, item.value, item.unit, item.source]);
  });
  return { name: 'Panel', note: 'Analytes with their properties, one property a row', columns, rows };
}

function variantsSheet(view: SummaryView): ReportSheet {
  return {
    name: 'Variants',
    note: 'Candidate procedures, one step a row',
    columns: [
      text('Variant', 9),
      text('Name', 26),
      text('Step', 7),
      text('Stage', 15),
      text('Kind', 18),
      text('What is done', 70),
      text('Parameters', 34)
    ],
    rows: view.variants.flatMap((variant) =>
      variant.steps.map((step, index): ReportCell[] => [
        variant.code,
        variant.name,
        index + 1,
        step.stage,
        step.kind,
        step.instruction,
        step.parameters
      ])
    )
  };
}

function stagesSheet(view: SummaryView, origin: string): ReportSheet {
  return {
    name: 'Stages',
    note: 'Experiments, stage by stage from the detector up',
    columns: [
      text('Stage', 15),
      text('Experiment', 11),
      text('Title', 34),
      text('Stands for', 11),
      text('Medium', 15),
      text('Matrix', 18),
      text('Level', 14),
      text('Portions', 36),
      text('Fractions', 44),
      text('Subtracts', 13),
      text('Calibration', 24),
      text('Performed', 12),
      text('Analyst', 18)
    ],
    rows: view.stages.flatMap((stage) =>
      stage.experiments.map((item): ReportCell[] => [
        `${stage.number} ${stage.name}`,
        item.number,
        { value: item.title, href: absolute(item.href, origin) },
        item.standsFor.join(', '),
        item.medium,
        item.matrix,
        item.level,
        item.portions,
        item.fractions.join(', '),
        item.subtracts,
        item.calibration,
        item.performedOn,
        item.analyst
      ])
    )
  };
}

/** A figure shown with as many decimals as keep it on its own side of the limits. */
function beside(value: number | null, limits: readonly number[]): ReportCell {
  if (value === null) return null;
  return { value, href: null, format: `0.${'0'.repeat(decimalsBeside(value, limits, 1))}` };
}

/** The first three columns of every sheet of findings. */
const subjectColumns = [text('Of', 34), text('Experiment', 11), text('Analyte', 24)];
const subjectCells = (findings: SummaryFindings, name: string, href: string): ReportCell[] => [
  findings.heading,
  findings.results.experiment.number,
  { value: name, href }
];

function resultsSheet(view: SummaryView): ReportSheet {
  return {
    name: 'Results',
    note: 'Method recoveries in percent of the spike, unrounded; the name opens where the figure comes from',
    columns: [
      ...subjectColumns,
      figure('n', '0', 6),
      figure('Mean, %'),
      figure('Lower 95 %'),
      figure('Upper 95 %'),
      figure('SD, points'),
      figure('RSD, %'),
      figure('Subtracted, %'),
      text('Verdict', 11),
      text('Why', 50),
      text('Criteria', 36),
      figure('Relative recovery, %'),
      text('Notes', 50)
    ],
    rows: view.findings.flatMap((findings) =>
      findings.results.rows.map((row): ReportCell[] => [
        ...subjectCells(findings, row.name, row.href),
        row.n,
        beside(row.mean, row.limits.mean),
        beside(row.interval?.lower ?? null, row.limits.mean),
        beside(row.interval?.upper ?? null, row.limits.mean),
        row.sd,
        beside(row.rsd, row.limits.rsd),
        row.subtracted,
        row.verdict ?? 'no verdict',
        row.reasons.join('; '),
        row.criteria,
        row.relative?.mean ?? null,
        [...row.notes, ...(row.flagged ? [row.flagged] : []), ...findings.results.notes].join('; ')
      ])
    )
  };
}

function balanceSheet(view: SummaryView): ReportSheet {
  return {
    name: 'Mass balance',
    note: 'Percent of the spike by fraction, then what was lost downstream and what is open',
    columns: [
      ...subjectColumns,
      text('Part', 24),
      text('Counts for', 12),
      figure('Mean, %'),
      figure('Not detected in', '0'),
      text('Remark', 60)
    ],
    rows: view.findings.flatMap((findings) =>
      findings.balance.rows.flatMap((row): ReportCell[][] => {
        const head = subjectCells(findings, row.name, row.href);
        const part = (
          name: string,
          counts: string,
          mean: number | null,
          more: ReportCell[] = []
        ): ReportCell[] => [...head, name, counts, mean, ...more];
        return [
          ...row.segments.map((segment) =>
            part(segment.name, segment.countsAs, segment.mean, [segment.notDetected])
          ),
          part('All fractions', 'balance', row.total, [null, row.incomplete]),
          part('Lost downstream', '', row.downstream),
          part('Open', '', row.open, [
            null,
            row.openSignificant ? 'differs from zero' : 'does not differ from zero'
          ])
        ];
      })
    )
  };
}

function lossesSheet(view: SummaryView): ReportSheet {
  return {
    name: 'Losses by stage',
    note: 'Points of 100 in the sample that each stage takes',
    columns: [
      ...subjectColumns,
      text('Stage', 16),
      figure('Lost, points'),
      figure('Lower 95 %'),
      figure('Upper 95 %'),
      figure('p, adjusted', '0.0000'),
      text('Remark', 60)
    ],
    rows: view.findings.flatMap((findings) =>
      (findings.walkBack?.rows ?? []).flatMap((row): ReportCell[][] =>
        row.losses.map((loss, index): ReportCell[] => [
          ...subjectCells(findings, row.name, loss?.href ?? row.href),
          findings.walkBack?.stages[index]?.name ?? '',
          loss?.lost ?? null,
          loss?.interval?.lower ?? null,
          loss?.interval?.upper ?? null,
          loss?.pAdjusted ?? null,
          row.gap
        ])
      )
    )
  };
}

function surrogatesSheet(view: SummaryView): ReportSheet {
  return {
    name: 'Surrogates',
    note: 'Percent of the amount added, in every portion',
    columns: [
      text('Of', 34),
      text('Experiment', 11),
      text('Surrogate', 24),
      text('Portion', 12),
      text('Kind', 20),
      figure('Recovery, %'),
      text('Holds', 10),
      text('Remark', 50)
    ],
    rows: view.findings.flatMap((findings) =>
      findings.portions.surrogates.flatMap((row): ReportCell[][] =>
        row.refusal !== null
          ? [[...subjectCells(findings, row.name, row.href), null, null, null, null, row.refusal]]
          : findings.portions.portions.map((portion, index): ReportCell[] => {
              const cell = row.cells[index];
              const holds =
                cell?.holds === null || cell === undefined ? null : cell.holds ? 'inside' : 'outside';
              return [
                ...subjectCells(findings, row.name, row.href),
                portion.label,
                portion.kind,
                cell?.percent ?? null,
                holds,
                cell?.setAside ? `set aside: ${cell.reason ?? ''}` : (cell?.reason ?? null)
              ];
            })
      )
    )
  };
}

function blanksSheet(view: SummaryView): ReportSheet {
  return {
    name: 'Blanks',
    note: 'Analytes found in a method blank, ng over all fractions',
    columns: [
      text('Of', 34),
      text('Experiment', 11),
      text('Analyte', 24),
      text('Blank', 12),
      text('Found, ng', 12),
      figure('Mean, % of the spike')
    ],
    rows: view.findings.flatMap((findings) =>
      findings.portions.blanks.flatMap((row) =>
        row.cells.map((cell): ReportCell[] => [
          findings.heading,
          findings.results.experiment.number,
          row.name,
          cell.label,
          cell.text,
          row.percentOfSpike
        ])
      )
    )
  };
}

function calibrationSheet(view: SummaryView): ReportSheet {
  return {
    name: 'Calibration',
    note: 'How each analyte is fitted, and what its rules say',
    columns: [
      text('Set', 28),
      text('Instrument', 22),
      text('Date', 12),
      text('Analyte', 24),
      text('Fit', 40),
      figure('Points', '0', 8),
      figure('r²', '0.00000'),
      figure('RSE, %'),
      text('Rules', 10),
      text('What they say', 60)
    ],
    rows: view.calibrations.flatMap((set) =>
      set.rows.map((row): ReportCell[] => [
        set.name,
        set.instrument,
        set.calibratedOn,
        { value: row.name, href: row.href },
        row.choice,
        row.points,
        row.r2,
        row.rse,
        row.holds === null ? null : row.holds ? 'hold' : 'broken',
        row.says
      ])
    )
  };
}

function exclusionsSheet(view: SummaryView, origin: string): ReportSheet {
  return {
    name: 'Exclusions',
    note: 'What was set aside, why and by whom; times in UTC',
    columns: [
      text('Experiment', 11),
      text('What', 34),
      text('Cause', 60),
      text('By', 20),
      text('At', 22),
      text('Lifted', 50)
    ],
    rows: view.exclusions.map((item): ReportCell[] => [
      item.experiment,
      { value: item.what, href: absolute(item.href, origin) },
      item.cause,
      item.by,
      item.at,
      item.lifted
    ])
  };
}

function importsSheet(view: SummaryView, origin: string): ReportSheet {
  return {
    name: 'Files',
    note: 'The files the data came from, kept byte for byte; times in UTC',
    columns: [
      text('File', 40),
      text('SHA-256', 68),
      figure('Bytes', '0'),
      text('State', 12),
      text('Stored', 22),
      text('By', 20),
      text('Why it ended', 50)
    ],
    rows: view.imports.map((item): ReportCell[] => [
      { value: item.fileName, href: absolute(item.href, origin) },
      item.sha256,
      item.byteSize,
      item.state,
      item.storedAt,
      item.storedBy,
      item.endReason
    ])
  };
}

function absolute(href: string | null, origin: string): string | null {
  return href === null ? null : href.startsWith('/') ? `${origin}${href}` : href;
}
