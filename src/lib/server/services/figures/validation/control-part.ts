import { percentText } from '../../../../domain/figure-text';
import type { ControlChartView, ValidationPart } from '../../../../views/validation';
import type { Verdict } from '../../../../views/verdict';
import { ownLimitsFrom, type Outside } from '../../../amounts/validation/control';
import type { Link } from '../addresses';
import { ruleView } from '../figure-parts';
import { column, count, percent, textColumn, words, worstFirst } from './cells';
import type { ValidationContext } from './context';
import { controlSeries, placeText, type ControlSeries } from './control-points';
import { partOf } from './part';
import { publishedRules } from './published-rules';
import { variantKey } from './variant-key';

const saysOf: Readonly<Record<Outside, string>> = {
  rule: 'outside the rule',
  action: 'beyond 3 s',
  warning: 'beyond 2 s'
};

/** Surrogates and internal standards in the order they were measured, against limits of their own and against the rules. */
export function controlPart(context: ValidationContext, link: Link): ValidationPart {
  const series = controlSeries(context).filter(
    ({ points, refusal }) => points.length > 0 || refusal !== null
  );
  const charts = series.flatMap((item) => (item.control.n > 0 ? [chartOf(context, item, link)] : []));
  const rows = series.map((item) => {
    const { control, entry, refusal } = item;
    const verdict = verdictOf(item);
    const { limits } = control;
    return {
      key: entry.id,
      panelEntryId: entry.id,
      name: entry.name,
      href: link({ kind: 'control', variant: variantKey(context), entry: entry.id }),
      verdict,
      why: refusal ?? whyOf(item),
      worst: control.points.filter(({ outside }) => outside.length > 0).length,
      cells: [
        words(entry.role === 'surrogate' ? 'recovery' : 'area'),
        count(control.n),
        percent(limits?.centre ?? null),
        percent(control.sd),
        percent(limits?.action.lower ?? null),
        percent(limits?.action.upper ?? null),
        words(
          control.points
            .filter(({ outside }) => outside.length > 0)
            .map(({ label }) => label)
            .join(', ') || null
        )
      ]
    };
  });
  const rules = [...new Set(series.flatMap(({ rule }) => (rule ? [rule] : [])))];
  const few = series.filter(({ control }) => control.n > 0 && !control.enough);
  return partOf(context, 'control', {
    meaning: [
      'Whether every preparation and every vial went as the others did. Surrogates are read as percent of what was added, internal standards as percent of what the calibration levels make of the same concentration; the mean, 2 s and 3 s are of these points themselves.',
      'A point beyond a limit is a question about that portion. It is never taken out by the program.'
    ],
    rests:
      context.evidence('control').experiments.length > 0
        ? [
            `${Math.max(0, ...series.map(({ points }) => points.length))} points at most, in ${context.evidence('control').experiments.length} experiments`
          ]
        : [],
    rules: rules.map(ruleView),
    beside: publishedRules.ownLimits,
    missing: [
      ...(series.length === 0 ? ['A surrogate or an internal standard with data.'] : []),
      ...(few.length > 0
        ? [
            `${Math.min(...few.map(({ control }) => control.n))} of ${ownLimitsFrom} points: limits of the lab's own are not to be used yet. They are drawn to be seen, not to be held to.`
          ]
        : []),
      ...(series.some(({ rule, entry }) => !rule && entry.role === 'surrogate')
        ? ['A rule for surrogates in the criteria of the study.']
        : [])
    ],
    notes: series.some(({ points }) => points.some(({ day }) => day === null))
      ? ['Points without a date stand at the end.']
      : [],
    tables: [
      {
        key: 'control',
        caption: 'Mean, scatter and limits of their own, percent',
        judged: rules.length > 0,
        columns: [
          textColumn('what', 'What'),
          column('n', 'n'),
          column('mean', 'Mean', '%'),
          column('sd', 's', 'points'),
          column('lower', 'Mean − 3 s', '%'),
          column('upper', 'Mean + 3 s', '%'),
          textColumn('outside', 'Points outside')
        ],
        rows: worstFirst(rows)
      }
    ],
    charts
  });
}

function verdictOf({ control, rule }: ControlSeries): Verdict | null {
  if (control.n === 0) return null;
  const passes = (what: Outside): boolean => control.points.some(({ outside }) => outside.includes(what));
  if (passes('rule')) return 'outside';
  if (passes('action')) return 'watch';
  return rule ? 'inside' : null;
}

function whyOf({ control, rule }: ControlSeries): string {
  const counted = (what: Outside): string[] => {
    const found = control.points.filter(
      ({ outside }) => outside[0] === what || (what !== 'rule' && outside.includes(what))
    );
    return found.length > 0 ? [`${found.length} ${saysOf[what]}`] : [];
  };
  const said = [...counted('rule'), ...counted('action'), ...counted('warning')];
  return said.length > 0 ? said.join('; ') : rule ? '' : 'no rule';
}

function chartOf(context: ValidationContext, series: ControlSeries, link: Link): ControlChartView {
  const { control, entry, rule } = series;
  const { limits } = control;
  const sources = new Map(series.points.map((point) => [point.key, point]));
  return {
    key: entry.id,
    panelEntryId: entry.id,
    name: entry.name,
    unit: entry.role === 'surrogate' ? '% of the amount added' : '% of the area in the calibration',
    points: control.points.flatMap((point) => {
      if (point.value === null) return [];
      const source = sources.get(point.key);
      const [farthest = null] = point.outside;
      return [
        {
          key: point.key,
          label: point.label,
          place: placeText(point),
          day: point.day,
          value: point.value,
          counted: point.counted,
          says: point.counted
            ? point.outside.map((what) => saysOf[what]).join(', ')
            : (point.reason ?? 'not counted'),
          outside: farthest,
          href:
            source?.opensEntry && source.fractionId !== null
              ? link({
                  kind: 'amount',
                  experiment: point.experiment,
                  entry: source.opensEntry,
                  replicate: source.replicateId,
                  fraction: source.fractionId
                })
              : null
        }
      ];
    }),
    limits: limits && {
      centre: limits.centre,
      warning: [limits.warning.lower, limits.warning.upper],
      action: [limits.action.lower, limits.action.upper]
    },
    rule: { low: rule?.low ?? null, high: rule?.high ?? null },
    n: control.n,
    sentences: [
      limits
        ? `${control.n} points, mean ${percentText(limits.centre)} %, s ${percentText(control.sd ?? 0)}.`
        : `${control.n} point, too few for limits.`,
      ...(control.enough
        ? []
        : [`Limits of one's own want ${ownLimitsFrom} points; until then the rule alone counts.`])
    ],
    missing: control.points.flatMap((point) =>
      point.value === null ? [`${point.label}, ${placeText(point)}: ${point.reason ?? 'no figure'}`] : []
    )
  };
}
