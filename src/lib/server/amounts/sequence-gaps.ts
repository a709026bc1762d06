import { figureText } from '../../domain/figure-text';
import { ruleOf } from './check-readings';
import type { InjectionNames } from './injection-names';
import type { Run } from './sequence-runs';
import type {
  CheckReading,
  CheckStandard,
  SequenceGap,
  SequenceInjection,
  SequenceInput
} from './sequence-types';
import type { CalibrationSet } from './types';

interface Given {
  readonly run: Run;
  readonly set: CalibrationSet;
  /** Of the run, read by the set, in order. */
  readonly injections: readonly SequenceInjection[];
  readonly checks: ReadonlyMap<string, CheckStandard>;
  /** Of continuing checks. */
  readonly readings: readonly CheckReading[];
  readonly names: InjectionNames;
  readonly nameOfEntry: (entryId: string) => string;
  readonly input: SequenceInput;
}

/** What one run does not show of one set: extracts without a check before or after them, checks without a reading, too long a wait. */
export function sequenceGaps(given: Given): SequenceGap[] {
  const { run, set, injections, checks } = given;
  const extracts = injections.filter(({ subject }) => subject.kind === 'extract');
  if (extracts.length === 0) return [];
  const kindOf = ({ subject }: SequenceInjection): 'opens' | 'checks' | null => {
    if (subject.kind === 'level') return 'opens';
    if (subject.kind !== 'check') return null;
    return checks.get(subject.checkStandardId)?.kind === 'continuing' ? 'checks' : 'opens';
  };
  const gap = (
    kind: SequenceGap['kind'],
    text: string,
    concerned: readonly SequenceInjection[],
    rule: SequenceGap['rule'] = null
  ): SequenceGap => ({
    calibrationSetId: set.id,
    kind,
    text,
    rule,
    injectionIds: concerned.map(({ id }) => id)
  });
  const gaps: SequenceGap[] = [];
  const last = injections.findLastIndex((injection) => kindOf(injection) === 'checks');
  if (last < 0) {
    gaps.push(
      gap(
        'no check',
        `No continuing check was run with ${counted(extracts.length, 'extract')} that ${set.name} reads.`,
        extracts
      )
    );
  } else {
    const first = injections.findIndex((injection) => kindOf(injection) !== null);
    const early = injections.slice(0, first).filter(isExtract);
    if (early.length > 0)
      gaps.push(
        gap('not opened', `${whoCame(early.length)} before the first check and before any level.`, early)
      );
    const late = injections.slice(last + 1).filter(isExtract);
    if (late.length > 0) {
      const name = given.names.of(injections[last]?.id ?? '');
      gaps.push(
        gap(
          'not closed',
          `No check closes the run: ${whoCame(late.length).toLowerCase()} after ${name}, its last.`,
          late
        )
      );
    }
    if (run.orderedBy === 'file') {
      gaps.push(
        gap(
          'order of the file',
          'Not every injection has a time, so that the order is that of the rows in the file.',
          []
        )
      );
    }
  }
  return [...gaps, ...unreadGaps(given, gap), ...intervalGaps(given, kindOf, gap)];
}

/** Whether a second source has ever been read by a set. */
export function secondSourceGap(
  set: CalibrationSet,
  input: SequenceInput,
  read: ReadonlyMap<string, unknown>
): readonly SequenceGap[] {
  if (set.reported.length === 0) return [];
  const hasRead = [...read.keys()].some((key) => key.startsWith(`${set.id} `));
  if (hasRead) return [];
  const isDescribed = input.checkStandards.some(
    ({ kind, calibrationSetId }) => kind === 'second source' && calibrationSetId === set.id
  );
  return [
    {
      calibrationSetId: set.id,
      kind: 'no second source',
      text: isDescribed
        ? `The second-source check of ${set.name} is described, and no file has brought a reading of it.`
        : `No second source has been read by ${set.name}: nothing but its own levels speaks for their concentrations.`,
      rule: ruleOf(input.rules, 'second-source check'),
      injectionIds: []
    }
  ];
}

type MakeGap = (
  kind: SequenceGap['kind'],
  text: string,
  concerned: readonly SequenceInjection[],
  rule?: SequenceGap['rule']
) => SequenceGap;

function unreadGaps({ injections, readings, names, nameOfEntry, input }: Given, gap: MakeGap): SequenceGap[] {
  const gaps: SequenceGap[] = [];
  for (const injection of injections) {
    const unread = readings.filter(
      ({ injectionId, state }) => injectionId === injection.id && state === 'unread'
    );
    const [first] = unread;
    if (!first) continue;
    const others = unread.length > 1 ? `, and of ${unread.length - 1} more` : '';
    gaps.push(
      gap(
        'unread',
        `${names.of(injection.id)} gives no reading of ${nameOfEntry(first.entryId)} (${first.why ?? ''})${others}, so that it ends no bracket for ${unread.length === 1 ? 'it' : 'them'}.`,
        [injection]
      )
    );
  }
  const held = new Set(readings.map(({ entryId }) => entryId));
  if (held.size === 0) return gaps;
  const ids = new Set(injections.map(({ id }) => id));
  const measured = new Set(
    input.experiments.flatMap(({ reported }) =>
      reported.filter(({ injectionId }) => ids.has(injectionId)).map(({ entryId }) => entryId)
    )
  );
  const without = [...input.panel.values()].filter(
    ({ id, role }) => role !== 'injection internal standard' && measured.has(id) && !held.has(id)
  );
  const [first] = without;
  if (first) {
    const others = without.length > 1 ? ` and ${without.length - 1} more` : '';
    gaps.push(
      gap(
        'no check',
        `No continuing check holds ${first.name}${others}, which the extracts were measured for.`,
        []
      )
    );
  }
  return gaps;
}

function intervalGaps(
  { run, injections, input }: Given,
  kindOf: (injection: SequenceInjection) => 'opens' | 'checks' | null,
  gap: MakeGap
): SequenceGap[] {
  const rule = ruleOf(input.rules, 'time between checks');
  if (rule?.high == null || run.orderedBy !== 'time') return [];
  const late: SequenceInjection[] = [];
  let longest = 0;
  let since: number | null = null;
  for (const injection of injections) {
    if (kindOf(injection) !== null) since = injection.runAt;
    if (!isExtract(injection) || since === null || injection.runAt === null) continue;
    const hours = (injection.runAt - since) / 3_600_000;
    if (hours <= rule.high) continue;
    late.push(injection);
    longest = Math.max(longest, hours);
  }
  if (late.length === 0) return [];
  return [
    gap(
      'interval',
      `${whoCame(late.length)}${late.length === 1 ? '' : ' up to'} ${figureText(longest, 2)} h after the check before ${late.length === 1 ? 'it' : 'them'}; at most ${rule.high} h may lie between.`,
      late,
      rule
    )
  ];
}

const isExtract = ({ subject }: SequenceInjection): boolean => subject.kind === 'extract';
const counted = (count: number, one: string): string => `${count} ${one}${count === 1 ? '' : 's'}`;
const whoCame = (count: number): string =>
  count === 1 ? 'One extract was run' : `${count} extracts were run`;
