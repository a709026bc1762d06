import type { CalibrationSetForm } from '../../schemas/calibration';
import type { PanelEntryView } from '../../views/panel';
import type { Problem } from '../errors';

/** What one level holds of one panel entry. */
export interface LevelConcentration {
  readonly label: string;
  readonly panelEntryId: string;
  readonly concentrationNgPerMl: number;
}

/** Repairs digits that a multiplication rounds away: 0.1 · 3 is 0.3. */
const tidied = (value: number): number => Number(value.toPrecision(14));

/**
 * Spells out the concentrations of a set, level by level and entry by entry: the level's own, times the entry's factor; for an
 * internal standard with a constant one, that; a single given one in place of both, 0 too. Entries at 0 are not in the standards; an injection
 * or extraction standard without a constant is left out, since it does not follow the levels.
 */
export function spelledConcentrations(
  form: CalibrationSetForm,
  panel: readonly PanelEntryView[],
  problems: Problem[]
): readonly LevelConcentration[] {
  const known = new Set(panel.map(({ id }) => id));
  for (const part of ['factors', 'constants', 'concentrations'] as const) {
    for (const id of Object.keys(form[part])) {
      if (!known.has(id))
        problems.push({ path: `${part}.${id}`, message: 'This entry is not on the panel.' });
    }
  }
  for (const [index, { cells, concentrationNgPerMl }] of form.levels.entries()) {
    for (const id of Object.keys(cells ?? {}).filter((item) => !known.has(item)))
      problems.push({ path: `levels.${index}.cells.${id}`, message: 'This entry is not on the panel.' });
    if (concentrationNgPerMl === null && !Object.values(cells ?? {}).some((value) => value !== null)) {
      problems.push({
        path: `levels.${index}.concentrationNgPerMl`,
        message: 'Give the concentration of this level, in ng/mL, or what it holds of single analytes.'
      });
    }
  }
  const labels = new Set<string>();
  for (const [index, { label }] of form.levels.entries()) {
    if (labels.has(label)) {
      problems.push({ path: `levels.${index}.label`, message: `There are two levels called ${label}.` });
    }
    labels.add(label);
  }
  return panel.flatMap(({ id, role }) => {
    const isStandard = role === 'extraction internal standard' || role === 'injection internal standard';
    return form.levels.flatMap(({ label, concentrationNgPerMl, cells }): LevelConcentration[] => {
      const single = cells?.[id] ?? form.concentrations[id]?.[label] ?? null;
      const constant = form.constants[id] ?? null;
      const following =
        isStandard && form.factors[id] == null ? 0 : (concentrationNgPerMl ?? 0) * (form.factors[id] ?? 1);
      const value = single ?? constant ?? following;
      return value > 0 ? [{ label, panelEntryId: id, concentrationNgPerMl: tidied(value) }] : [];
    });
  });
}

/**
 * Why these levels cannot be left out of a fit; null: they can. Only the ends of the range may go, so that no inconvenient point
 * within it does, and the rest must still carry the model.
 */
export function leavingOutProblem(
  levels: readonly { readonly id: string; readonly label: string; readonly concentration: number | null }[],
  leftOut: readonly string[],
  coefficients: number
): string | null {
  const held = levels
    .filter((level): level is typeof level & { concentration: number } => level.concentration !== null)
    .sort((a, b) => a.concentration - b.concentration);
  const unknown = leftOut.filter((id) => !held.some((level) => level.id === id));
  if (unknown.length > 0) return 'A level that is to be left out does not hold this analyte.';
  const used = held.map(({ id }) => !leftOut.includes(id));
  const inner = held.slice(used.indexOf(true), used.lastIndexOf(true)).find(({ id }) => leftOut.includes(id));
  if (!used.includes(true)) return 'At least one level has to stay.';
  if (inner) return `${inner.label} lies within the range: levels are left out at its ends only.`;
  const rest = used.filter(Boolean).length;
  return rest <= coefficients
    ? `${rest} levels are left, and this model needs more than ${coefficients}.`
    : null;
}
