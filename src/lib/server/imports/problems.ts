import { cellAddress } from './cell-address';
import type { Problem, ProblemCode, ProblemSeverity } from './types';

export interface ProblemInput {
  readonly code: ProblemCode;
  readonly sheet: string | null;
  readonly row?: number;
  readonly column?: number;
  readonly found: string;
  readonly expected: string;
  /** A whole sentence without the place: it is put in front. */
  readonly what: string;
  readonly fix: string;
  readonly answer?: Problem['answer'];
}

/** A file with more problems of one kind has one fault, made many times. */
export const shownOfAKind = 1000;

/** Problems that say the same of many cells are reported once, with the first cell and how many more there are. */
interface Grouped {
  readonly severity: ProblemSeverity;
  readonly input: ProblemInput;
  count: number;
}

/** Where problems are reported to. */
export interface Problems {
  error(input: ProblemInput): void;
  question(input: ProblemInput): void;
  note(input: ProblemInput): void;
  /** @param group what is the same in all the cells that share one problem */
  oncePer(group: string, severity: ProblemSeverity, input: ProblemInput): void;
}

/** Collects all problems of a file. */
export class ProblemList implements Problems {
  readonly #problems: (Problem | Grouped)[] = [];
  readonly #groups = new Map<string, Grouped>();

  error(input: ProblemInput): void {
    this.#problems.push(toProblem('error', input, 1));
  }

  question(input: ProblemInput): void {
    this.#problems.push(toProblem('question', input, 1));
  }

  note(input: ProblemInput): void {
    this.#problems.push(toProblem('note', input, 1));
  }

  /** For whoever reads a sheet turned: the cells named are those of the sheet as it is. */
  turned(): Problems {
    const turn = (input: ProblemInput): ProblemInput =>
      input.row === undefined ? input : { ...input, row: input.column ?? 0, column: input.row };
    return {
      error: (input) => this.error(turn(input)),
      question: (input) => this.question(turn(input)),
      note: (input) => this.note(turn(input)),
      oncePer: (group, severity, input) => this.oncePer(group, severity, turn(input))
    };
  }

  oncePer(group: string, severity: ProblemSeverity, input: ProblemInput): void {
    const key = `${input.code}\u0000${input.sheet}\u0000${group}`;
    const known = this.#groups.get(key);
    if (known) {
      known.count++;
      return;
    }
    const grouped: Grouped = { severity, input, count: 1 };
    this.#groups.set(key, grouped);
    this.#problems.push(grouped);
  }

  /**
   * Errors first, then questions, then notes; within each in the order of the file. Of one kind at most `shownOfAKind` are
   * listed, and then how many more there are.
   */
  all(): readonly Problem[] {
    const order: Readonly<Record<ProblemSeverity, number>> = { error: 0, question: 1, note: 2 };
    const counts = new Map<string, number>();
    const listed: Problem[] = [];
    for (const entry of this.#problems) {
      const kind = `${entry.severity}\u0000${'input' in entry ? entry.input.code : entry.code}`;
      const count = (counts.get(kind) ?? 0) + 1;
      counts.set(kind, count);
      if (count <= shownOfAKind)
        listed.push('input' in entry ? toProblem(entry.severity, entry.input, entry.count) : entry);
    }
    const more = listed.flatMap((problem) => {
      const count = counts.get(`${problem.severity}\u0000${problem.code}`) ?? 0;
      counts.delete(`${problem.severity}\u0000${problem.code}`);
      return count > shownOfAKind ? [moreOf(problem, count - shownOfAKind)] : [];
    });
    return [...listed, ...more].sort((one, other) => order[one.severity] - order[other.severity]);
  }
}

function moreOf(problem: Problem, count: number): Problem {
  return {
    ...problem,
    cell: null,
    found: `${count} more`,
    message: `${count} more problems are of the same kind as this one: ${problem.message}`
  };
}

function toProblem(severity: ProblemSeverity, input: ProblemInput, count: number): Problem {
  const cell = input.row === undefined ? null : cellAddress(input.row, input.column ?? 0);
  const more = count > 1 ? ` The same goes for ${count - 1} more ${count === 2 ? 'cell' : 'cells'}.` : '';
  const place = [input.sheet, cell].filter((part) => part !== null).join(', ');
  return {
    severity,
    code: input.code,
    sheet: input.sheet,
    cell,
    found: input.found,
    expected: input.expected,
    message: `${place === '' ? '' : `${place}: `}${input.what}${more}`,
    fix: input.fix,
    answer: severity === 'question' ? (input.answer ?? 'confirm') : null
  };
}
