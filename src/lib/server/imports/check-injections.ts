import type { DraftRecord } from './map-sheet';
import type { Problems } from './problems';
import type { PanelExpectation } from './types';

/** The rows of one check that the file numbers alike (or not at all), which may be several injections. */
interface CheckRows {
  readonly name: string;
  readonly drafts: DraftRecord[];
}

/**
 * Tells the injections of a check apart. A check is run again and again under one label, and files seldom number its injections: each is a
 * reading of its own, never averaged with another and never a repetition of one.
 *
 * Rows of a check belong to one injection where the file gives them one injection number and, if every row has one, one acquisition time. Without
 * times the next row with an analyte that the injection has already begins the next injection, so that both orders of a table are
 * read, sample by sample and analyte by analyte; an analyte that then has fewer readings than its fellows leaves open where the gap is,
 * and that is a problem.
 *
 * A check whose cells are all empty was not run (templates have rows for each), and is passed over.
 *
 * @returns the drafts in their order; those of checks with `injection` counted through the file from 1
 */
export function numberedChecks(
  drafts: readonly DraftRecord[],
  panel: ReadonlyMap<string, PanelExpectation>,
  problems: Problems
): readonly DraftRecord[] {
  const groups = new Map<string, CheckRows>();
  for (const draft of drafts) {
    if (draft.place.kind !== 'check') continue;
    const key = `${draft.place.checkStandardId} ${draft.injection}`;
    const group = groups.get(key) ?? { name: draft.placeName, drafts: [] };
    groups.set(key, group);
    group.drafts.push(draft);
  }
  if (groups.size === 0) return drafts;

  const runOf = new Map<DraftRecord, string>();
  for (const [key, group] of groups) {
    const timed = group.drafts.every(({ acquiredAt }) => acquiredAt !== null);
    const runs = timed ? byTime(group) : byOccurrence(group, panel, problems);
    for (const [draft, run] of runs) runOf.set(draft, `${key} ${run}`);
  }
  const filled = new Set<string>();
  const momentOf = new Map<string, string>();
  for (const [draft, run] of runOf) {
    if (draft.state !== 'missing') filled.add(run);
    if (draft.acquiredAt === null) continue;
    const known = momentOf.get(run);
    if (known === undefined) momentOf.set(run, draft.acquiredAt);
    else if (known !== draft.acquiredAt) reportTwoMoments(draft, known, problems);
  }
  const numberOf = new Map<string, number>();
  const counted = new Map<string, number>();
  return drafts.flatMap((draft): readonly DraftRecord[] => {
    const run = runOf.get(draft);
    if (run === undefined || draft.place.kind !== 'check') return [draft];
    if (!filled.has(run)) return [];
    const { checkStandardId } = draft.place;
    let number = numberOf.get(run);
    if (number === undefined) {
      number = (counted.get(checkStandardId) ?? 0) + 1;
      counted.set(checkStandardId, number);
      numberOf.set(run, number);
    }
    // A time that one row of the injection gives is that of all.
    return [{ ...draft, injection: number, acquiredAt: momentOf.get(run) ?? null }];
  });
}

function reportTwoMoments(draft: DraftRecord, known: string, problems: Problems): void {
  problems.oncePer(`moment ${draft.placeName}`, 'error', {
    code: 'check injections unclear',
    sheet: draft.sheet,
    row: draft.row,
    column: draft.column,
    found: `${draft.acquiredAt ?? ''} and ${known}`,
    expected: 'the acquisition time in each row of the check',
    what: `Some rows of the check ${draft.placeName} have an acquisition time and others have none, so that ${known} and ${draft.acquiredAt ?? ''} would fall into one injection.`,
    fix: 'Give the time in each of its rows, or in none.'
  });
}

function byTime({ drafts }: CheckRows): ReadonlyMap<DraftRecord, string> {
  return new Map(drafts.map((draft) => [draft, draft.acquiredAt ?? '']));
}

function byOccurrence(
  { name, drafts }: CheckRows,
  panel: ReadonlyMap<string, PanelExpectation>,
  problems: Problems
): ReadonlyMap<DraftRecord, string> {
  const seen = new Map<string, number>();
  const runs = new Map<DraftRecord, string>();
  const rows = new Map<string, DraftRecord[]>();
  for (const draft of drafts) {
    const row = `${draft.sheet} ${draft.line}`;
    const known = rows.get(row);
    if (known) known.push(draft);
    else rows.set(row, [draft]);
  }
  for (const row of rows.values()) {
    // One row is one injection, whatever it repeats within itself.
    const run = 1 + Math.max(...row.map(({ panelEntryId }) => seen.get(panelEntryId) ?? 0));
    for (const draft of row) {
      seen.set(draft.panelEntryId, run);
      runs.set(draft, String(run));
    }
  }
  const most = Math.max(...seen.values());
  const fewer = [...seen].find(([, count]) => count < most);
  const [first] = drafts;
  if (fewer && first) {
    const [entryId, count] = fewer;
    problems.oncePer(name, 'error', {
      code: 'check injections unclear',
      sheet: first.sheet,
      row: first.row,
      column: first.column,
      found: `${most} and ${count} readings`,
      expected: 'each injection with its acquisition time or its number',
      what: `The check ${name} was read ${most} times, but ${panel.get(entryId)?.name ?? 'one analyte'} ${count === 1 ? 'once' : `${count} times`} only, and nothing tells which injection each row belongs to.`,
      fix: 'Give the acquisition time in each of its rows, or number its injections in a column “Injection”.'
    });
  }
  return runs;
}
