import { z } from 'zod';
import type { RecoveryBand } from '../../domain/recovery-band';
import { stageKinds } from '../../domain/stages';
import { countsAs } from '../../domain/vocabulary';
import type {
  CompareCell,
  CompareVariant,
  CompareView,
  ExperimentChoice,
  IntervalView,
  PortionsView,
  ResultRow,
  ResultsTableView,
  RuleView,
  StageFindings,
  SubjectView
} from '../../views/findings';
import type { MassBalanceRow, MassBalanceView } from '../../views/mass-balance';
import type { StageLadderView, StagePoint } from '../../views/stage-ladder';
import { verdicts, type Verdict } from '../../views/verdict';
import type { WalkBackView } from '../../views/walk-back';
import { describes, hrefOfFigure, list, number, object, text, whole } from './describe';

export const verdict = describes<Verdict>()(
  'Verdict',
  z.enum(verdicts).meta({ description: 'How mean and RSD stand against the criteria.' })
);

const interval = describes<IntervalView>()(
  'Interval',
  object({ lower: number, upper: number, level: number }).meta({
    description: 'Confidence interval in the unit of its figure; level 0.95 is 95 %.'
  })
);

export const rule = describes<RuleView>()(
  'Rule',
  object({
    what: text,
    limits: text,
    citation: text,
    standing: z.enum(['seen', 'memory', 'own']),
    note: text.nullable()
  }).meta({ description: 'An acceptance rule as it is cited.' })
);

const band = describes<RecoveryBand>()(
  'RecoveryBand',
  object({ low: number.nullable(), high: number.nullable() }).meta({
    description: 'What the study asks of a mean recovery, percent; a missing end is open.'
  })
);

const experimentChoice = describes<ExperimentChoice>()(
  'ExperimentChoice',
  object({ number: whole, title: text, stageName: text })
);

const subject = describes<SubjectView>()(
  'Subject',
  object({
    variant: object({ code: text, name: text }).nullable(),
    experiment: experimentChoice.nullable(),
    variants: list(object({ code: text, name: text, measured: z.boolean() })),
    experiments: list(experimentChoice)
  }).meta({
    description: 'The variant and experiment that the figures are about, and the others to choose from.'
  })
);

const findings = describes<StageFindings>()(
  'StageFindings',
  object({
    lead: text,
    named: list(object({ text, href: hrefOfFigure })),
    notes: list(text)
  })
);

const resultRow = describes<ResultRow>()(
  'Result',
  object({
    panelEntryId: text,
    name: text,
    role: text,
    class: text,
    n: whole.nullable(),
    mean: number.nullable(),
    sd: number.nullable(),
    rsd: number.nullable(),
    interval: interval.nullable(),
    subtracted: number.nullable(),
    verdict: verdict.nullable(),
    reasons: list(text),
    criteria: text,
    limits: object({ mean: list(number), rsd: list(number) }),
    relative: object({ mean: number, n: whole, standard: text }).nullable(),
    notes: list(text),
    flagged: text.nullable(),
    href: hrefOfFigure
  }).meta({
    description:
      'Method recovery of one analyte, in percent of the spike, unrounded. n counts preparations; null: no figure can be formed, and reasons or notes say why.'
  })
);

export const results = describes<{ subject: SubjectView; results: ResultsTableView | null }>()(
  'Results',
  object({
    subject,
    results: describes<ResultsTableView>()(
      'ResultsTable',
      object({ experiment: experimentChoice, rows: list(resultRow), notes: list(text), rules: list(rule) })
    ).nullable()
  })
);

const massBalanceRow = describes<MassBalanceRow>()(
  'MassBalanceRow',
  object({
    panelEntryId: text,
    name: text,
    role: text,
    class: text,
    verdict: verdict.nullable(),
    reasons: list(text),
    method: object({
      mean: number,
      n: whole,
      halfWidth: number.nullable(),
      sd: number.nullable(),
      rsd: number.nullable(),
      interval: interval.nullable()
    }).nullable(),
    segments: list(
      object({
        fractionKey: text,
        name: text,
        countsAs: z.enum(countsAs),
        mean: number,
        notDetected: whole,
        href: hrefOfFigure
      })
    ),
    downstream: number.nullable(),
    open: number.nullable(),
    openSignificant: z.boolean(),
    total: number.nullable(),
    incomplete: text.nullable(),
    flagged: text.nullable(),
    href: hrefOfFigure
  }).meta({ description: 'One analyte, in percent of the spike and points of it.' })
);

export const balance = describes<{
  subject: SubjectView;
  balance: MassBalanceView;
  notes: readonly string[];
}>()(
  'Balance',
  object({
    subject,
    balance: describes<MassBalanceView>()(
      'MassBalance',
      object({
        criteria: band.nullable(),
        fractions: list(object({ key: text, name: text, countsAs: z.enum(countsAs), slot: whole })),
        rows: list(massBalanceRow)
      })
    ),
    notes: list(text)
  })
);

const stagePoint = describes<StagePoint>()(
  'StagePoint',
  object({
    panelEntryId: text,
    name: text,
    value: number,
    verdict: verdict.nullable(),
    href: hrefOfFigure
  })
);

export const stages = describes<{ subject: SubjectView; ladder: StageLadderView; findings: StageFindings }>()(
  'Stages',
  object({
    subject,
    ladder: describes<StageLadderView>()(
      'StageLadder',
      object({
        criteria: band.nullable(),
        wholeMethod: object({ note: text, href: hrefOfFigure, points: list(stagePoint) }),
        reaches: list(
          object({
            key: text,
            name: text,
            number: whole,
            kind: z.enum(stageKinds),
            href: text,
            experiments: list(object({ title: text, href: text, detail: text })),
            remaining: number.nullable(),
            points: list(stagePoint),
            status: object({ verdict: verdict.nullable(), text }).nullable(),
            gap: object({ text, href: text.nullable(), action: text.nullable() }).nullable()
          })
        )
      }).meta({ description: 'From the source (sample) to the mouth (detector).' })
    ),
    findings
  })
);

export const walkBack = describes<{
  subject: SubjectView;
  walkBack: WalkBackView;
  findings: StageFindings;
}>()(
  'WalkBackAnswer',
  object({
    subject,
    walkBack: describes<WalkBackView>()(
      'WalkBack',
      object({
        stages: list(object({ key: text, name: text })),
        rows: list(
          object({
            panelEntryId: text,
            name: text,
            losses: list(
              object({
                stageKey: text,
                lost: number,
                interval: interval.nullable(),
                pAdjusted: number.nullable(),
                href: hrefOfFigure
              }).nullable()
            ),
            remaining: number.nullable(),
            gap: text.nullable(),
            href: hrefOfFigure
          })
        )
      }).meta({ description: 'What each stage takes of 100 in the sample, in points.' })
    ),
    findings
  })
);

const compareCell = describes<CompareCell>()(
  'CompareCell',
  object({
    mean: number,
    limits: list(number),
    halfWidth: number.nullable(),
    n: whole,
    verdict: verdict.nullable(),
    reason: text,
    flagged: text.nullable(),
    href: hrefOfFigure
  })
);

const compareVariant = describes<CompareVariant>()(
  'CompareVariant',
  object({
    code: text,
    name: text,
    experiment: experimentChoice.nullable(),
    counts: z.record(z.enum(verdicts), whole).readonly(),
    withoutVerdict: whole,
    worst: object({ name: text, mean: number, others: whole }).nullable(),
    solventMl: number.nullable(),
    minutes: number.nullable()
  })
);

export const compare = describes<CompareView>()(
  'Compare',
  object({
    variants: list(compareVariant),
    rows: list(
      object({
        panelEntryId: text,
        name: text,
        class: text,
        cells: list(compareCell.nullable()),
        gaps: list(text.nullable())
      })
    )
  }).meta({ description: 'Cells and gaps of a row stand in the order of the variants.' })
);

export const portions = describes<PortionsView>()(
  'Portions',
  object({
    experiment: experimentChoice,
    rule: rule.nullable(),
    portions: list(object({ id: text, label: text, kind: text })),
    surrogates: list(
      object({
        panelEntryId: text,
        name: text,
        cells: list(
          object({
            percent: number.nullable(),
            holds: z.boolean().nullable(),
            setAside: z.boolean(),
            reason: text.nullable()
          })
        ),
        n: whole.nullable(),
        mean: number.nullable(),
        rsd: number.nullable(),
        refusal: text.nullable(),
        flagged: text.nullable(),
        href: hrefOfFigure
      })
    ),
    blanks: list(
      object({
        panelEntryId: text,
        name: text,
        cells: list(object({ label: text, text })),
        percentOfSpike: number.nullable()
      })
    ),
    blankLabels: list(text),
    matrix: list(
      object({
        panelEntryId: text,
        name: text,
        fraction: text,
        effect: number.nullable(),
        effectInterval: interval.nullable(),
        recovery: number.nullable(),
        efficiency: number.nullable(),
        href: hrefOfFigure
      })
    ),
    matrixNote: text.nullable()
  }).meta({
    description: 'Surrogates, blanks (ng) and matrix effects (percent; 100: none) of one experiment.'
  })
);
