import type { AnalyteVersionView } from '../../../views/library';
import type { ComparedView, LogKowView, StructureView } from '../../../views/structure';
import { givenText } from '../../../domain/given-text';
import { bestValue, drawStructure, predictor, type Structure } from '../../chemistry';
import { sameFormula } from './formula-match';
import { knownStructure } from './known-structure';

type Typed = Pick<AnalyteVersionView, 'name' | 'smiles' | 'formula' | 'molarMass' | 'logKow' | 'sources'>;

/** Atomic masses of two tables, and a value cut after two decimals, differ by less than this (g/mol). */
const sameMass = 0.05;

/** log Kow of the library, or where it holds none the prediction from the structure; null where there is neither. */
export function logKowView(
  { logKow, sources }: Pick<Typed, 'logKow' | 'sources'>,
  structure: Structure | null
): LogKowView | null {
  const predicted = structure?.predictedLogP ?? null;
  const best = bestValue(
    logKow === null ? null : { value: logKow, source: sources.logKow ?? null },
    predicted === null ? null : { value: predicted, source: predictor }
  );
  return (
    best && {
      value: best.value,
      basis: best.standing === 'typed' ? 'library' : 'predicted',
      source: best.source
    }
  );
}

function compared(typed: string | null, computed: string | null, agree: () => boolean | null): ComparedView {
  return { typed, computed, agree: typed === null || computed === null ? null : agree() };
}

const massText = (mass: number): string => givenText(Number(mass.toFixed(2)));

function notesOf({ parts, formalCharge, permanentCharge }: Structure): readonly string[] {
  return [
    ...(parts > 1
      ? [
          `The structure has ${parts} separate parts, a salt or a mixture: formula and molar mass are of all of them, and no log P is predicted.`
        ]
      : []),
    ...(permanentCharge !== 0
      ? ['It carries a charge that no pH takes away, so it is never neutral.']
      : formalCharge !== 0
        ? ['The structure is drawn as an ion; its pKa values say when it is one.']
        : [])
  ];
}

/** The structure of an analyte with what follows from it, beside what was typed: the typed value is the one that is used. */
export async function structureView(typed: Typed): Promise<StructureView> {
  const known = typed.smiles === null ? null : await knownStructure(typed.smiles);
  const structure = known?.read ? known.structure : null;
  const drawing =
    structure && typed.smiles !== null
      ? await drawStructure(typed.smiles, {
          title: `Structure of ${typed.name}: ${typed.smiles}`,
          width: 320,
          height: 220
        })
      : null;
  const mass = typed.molarMass;
  return {
    drawing,
    problem: known && !known.read ? known.problem : null,
    formula: compared(typed.formula, structure?.formula ?? null, () =>
      sameFormula(typed.formula ?? '', structure?.formula ?? '')
    ),
    molarMass: compared(
      mass === null ? null : givenText(mass),
      structure && massText(structure.molarMass),
      () => mass !== null && structure !== null && Math.abs(mass - structure.molarMass) <= sameMass
    ),
    logKow: logKowView(typed, structure),
    notes: structure ? notesOf(structure) : []
  };
}
