import type { CriterionRule } from '../../domain/criteria';
import { percentText } from '../../domain/figure-text';
import { limitsText } from '../../domain/rule-limits';
import { bracketsOf } from './brackets';
import type { InjectionNames } from './injection-names';
import type { WholeCheck } from './sequence-checks';
import type { BlankReading, CheckReading, Flag, SequenceInjection, StandardArea } from './sequence-types';
import type { PanelEntry } from './types';

/** By injection, then by panel entry. */
export type FlagsByInjection = ReadonlyMap<string, ReadonlyMap<string, readonly Flag[]>>;

interface Named {
  readonly nameOfEntry: (entryId: string) => string;
}
interface OfRun extends Named {
  readonly injections: readonly SequenceInjection[];
}

export interface FlagCollector {
  readonly flags: FlagsByInjection;
  readonly checks: (
    given: OfRun & {
      readonly readings: readonly CheckReading[];
      readonly wholes: readonly WholeCheck[];
      readonly names: InjectionNames;
    }
  ) => void;
  readonly blanks: (
    given: OfRun & { readonly blanks: readonly BlankReading[]; readonly names: InjectionNames }
  ) => void;
  readonly standards: (
    given: OfRun & {
      readonly areas: readonly StandardArea[];
      readonly panel: ReadonlyMap<string, PanelEntry>;
    }
  ) => void;
  /** @param name how the check's injection is named in its run */
  readonly secondSource: (
    extracts: readonly SequenceInjection[],
    reading: CheckReading,
    name: string,
    nameOfEntry: Named['nameOfEntry']
  ) => void;
}

/** @param measured which entries an extract's injection was measured for: no others are flagged in it */
export function flagCollector(measured: ReadonlyMap<string, ReadonlySet<string>>): FlagCollector {
  const flags = new Map<string, Map<string, Flag[]>>();
  const add = (injectionId: string, flag: Flag): void => {
    if (!measured.get(injectionId)?.has(flag.entryId)) return;
    const own = flags.get(injectionId) ?? new Map<string, Flag[]>();
    flags.set(injectionId, own);
    own.set(flag.entryId, [...(own.get(flag.entryId) ?? []), flag]);
  };

  return {
    flags,
    checks({ injections, readings, wholes, names, nameOfEntry }) {
      const wholeOf = new Map(wholes.map((whole) => [whole.injectionId, whole]));
      const byEntry = new Map<string, Map<string, CheckReading>>();
      for (const reading of readings) {
        if (reading.state === 'unread') continue;
        const own = byEntry.get(reading.entryId) ?? new Map<string, CheckReading>();
        byEntry.set(reading.entryId, own.set(reading.injectionId, reading));
      }
      for (const [entryId, ofEntry] of byEntry) {
        const isBad = (reading: CheckReading): boolean =>
          reading.state === 'fails' || wholeOf.get(reading.injectionId)?.holds === false;
        if (![...ofEntry.values()].some(isBad)) continue;
        for (const [injectionId, { before, after }] of bracketsOf(
          injections,
          (id) => ofEntry.get(id) ?? null
        )) {
          if (before !== null && before !== 'levels' && isBad(before)) {
            add(
              injectionId,
              checkFlag(before, 'before', wholeOf.get(before.injectionId), names, nameOfEntry(entryId))
            );
          }
          if (after !== null && isBad(after)) {
            add(
              injectionId,
              checkFlag(after, 'after', wholeOf.get(after.injectionId), names, nameOfEntry(entryId))
            );
          }
        }
      }
    },
    blanks({ injections, blanks, names, nameOfEntry }) {
      const failing = new Map<string, BlankReading[]>();
      for (const reading of blanks) {
        if (reading.state !== 'fails') continue;
        failing.set(reading.injectionId, [...(failing.get(reading.injectionId) ?? []), reading]);
      }
      let open: readonly BlankReading[] = [];
      for (const { id, subject } of injections) {
        if (subject.kind === 'blank') open = failing.get(id) ?? [];
        else if (subject.kind === 'extract') {
          for (const reading of open) add(id, blankFlag(reading, names, nameOfEntry(reading.entryId)));
        }
      }
    },
    standards({ injections, areas, panel, nameOfEntry }) {
      const extracts = new Set(
        injections.filter(({ subject }) => subject.kind === 'extract').map(({ id }) => id)
      );
      for (const area of areas) {
        if (!extracts.has(area.injectionId)) continue;
        for (const { rule, percent } of area.failures) {
          for (const entry of panel.values()) {
            if (entry.internalStandardId !== area.standardId) continue;
            add(area.injectionId, {
              cause: 'internal standard',
              injectionId: area.injectionId,
              entryId: entry.id,
              side: 'itself',
              text: `the area of ${nameOfEntry(area.standardId)} in it is ${percentText(percent, limitsIn(rule))} % of ${
                rule.type === 'internal standard area'
                  ? 'its mean over the levels'
                  : 'that in the latest check'
              } (${asked(rule)})`,
              rule
            });
          }
        }
      }
    },
    secondSource(extracts, reading, name, nameOfEntry) {
      const { rule, entryId, injectionId } = reading;
      if (!rule) return;
      for (const { id } of extracts) {
        add(id, {
          cause: 'second source',
          injectionId,
          entryId,
          side: 'calibration',
          text: `the second-source check ${name} ${readText(reading, nameOfEntry(entryId), rule)}`,
          rule
        });
      }
    }
  };
}

const limitsIn = ({ low, high }: CriterionRule): number[] => [low, high].filter((limit) => limit !== null);
const asked = (rule: CriterionRule): string => `${limitsText(rule)} asked for`;

/** "read Atrazine at 127 % of its concentration (80 to 120 % asked for)" */
export function readText(
  { percent, why }: Pick<CheckReading, 'percent' | 'why'>,
  name: string,
  rule: CriterionRule
): string {
  if (why === 'not detected') return `did not find ${name} (${asked(rule)})`;
  const read = `read ${name} at ${percentText(percent ?? 0, limitsIn(rule))} % of its concentration`;
  return why === null ? `${read} (${asked(rule)})` : `${read}, but ${why} (${asked(rule)})`;
}

function checkFlag(
  reading: CheckReading,
  side: 'before' | 'after',
  whole: WholeCheck | undefined,
  names: InjectionNames,
  entryName: string
): Flag {
  const check = `the continuing check ${side} it, ${names.of(reading.injectionId)},`;
  const base = { injectionId: reading.injectionId, entryId: reading.entryId, side };
  if (reading.state !== 'fails' && whole?.rule) {
    return {
      ...base,
      cause: 'check as a whole',
      text: `${check} fails for ${whole.failed} of ${whole.of} analytes (${limitsText(whole.rule)} may), so that it fails as a whole`,
      rule: whole.rule
    };
  }
  if (!reading.rule) throw new Error('a reading fails by a rule');
  return {
    ...base,
    cause: 'check',
    text: `${check} ${readText(reading, entryName, reading.rule)}`,
    rule: reading.rule
  };
}

function blankFlag(reading: BlankReading, names: InjectionNames, entryName: string): Flag {
  const { rule, percentOfLowest } = reading;
  return {
    cause: 'blank',
    injectionId: reading.injectionId,
    entryId: reading.entryId,
    side: 'before',
    text: `the instrument blank before it, ${names.of(reading.injectionId)}, holds ${entryName} at ${percentText(
      percentOfLowest ?? 0,
      limitsIn(rule)
    )} % of the lowest level (${asked(rule)})`,
    rule
  };
}
