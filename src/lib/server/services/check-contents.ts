import type { CheckStandardForm } from '../../schemas/check-standard';
import type { CheckEntryView } from '../../views/sequences';
import type { Problem } from '../errors';

export interface CheckContent {
  readonly panelEntryId: string;
  readonly concentrationNgPerMl: number;
}

/**
 * What a check holds: each analyte the concentration given for it, else, where the levels hold it, the one given for all; 0 means that
 * it is not in it. Internal standards do not follow the one for all. A blank holds internal standards and nothing else.
 */
export function checkContents(
  form: CheckStandardForm,
  entries: readonly CheckEntryView[],
  problems: Problem[]
): readonly CheckContent[] {
  const known = new Set(entries.map(({ panelEntryId }) => panelEntryId));
  for (const id of Object.keys(form.concentrations)) {
    if (!known.has(id))
      problems.push({ path: `concentrations.${id}`, message: 'This entry is not on the panel.' });
  }
  const isBlank = form.kind === 'instrument blank';
  const contents = entries.flatMap(({ panelEntryId, isStandard, range }): CheckContent[] => {
    const common = isBlank || isStandard || range === null ? null : form.concentrationNgPerMl;
    const value = form.concentrations[panelEntryId] ?? common ?? 0;
    return value > 0 ? [{ panelEntryId, concentrationNgPerMl: value }] : [];
  });
  const analytes = contents.filter(
    (content) =>
      entries.find(({ panelEntryId }) => panelEntryId === content.panelEntryId)?.isStandard === false
  );
  if (isBlank) {
    for (const { panelEntryId } of analytes) {
      problems.push({
        path: `concentrations.${panelEntryId}`,
        message: 'A blank holds no analytes; leave this empty, or describe a check.'
      });
    }
  } else if (analytes.length === 0) {
    problems.push({
      path: 'concentrationNgPerMl',
      message: 'It holds nothing yet: give the concentration of its analytes, here or one by one.'
    });
  }
  return contents;
}
