import type { FileProblemView, QuestionAnswer } from '../../views/brought-files';
import type { Study } from '../db/models/study';
import type { Problem } from '../imports/types';
import { coveredPlaces } from './import-coverage';
import { readKeptFile } from './import-reading';

const answers: Readonly<Record<NonNullable<Problem['answer']>, QuestionAnswer>> = {
  confirm: 'confirm',
  'declare basis': 'basis',
  'declare decimal': 'decimal'
};

/** The word by which programs know a kind of problem: "not a number" as "not-a-number". */
export const codeForPrograms = (code: string): string => code.replaceAll(' ', '-');

function problemView(problem: Problem): FileProblemView {
  const { severity, code, sheet, cell, found, expected, message, fix, answer } = problem;
  return {
    path: [sheet, cell].filter((part) => part !== null).join('!') || 'file',
    severity,
    code: codeForPrograms(code),
    sheet,
    cell,
    found,
    expected,
    message,
    fix,
    answer: answer && answers[answer]
  };
}

const aboutFile = (
  problem: Pick<FileProblemView, 'severity' | 'code' | 'found' | 'expected' | 'message' | 'fix' | 'answer'>
): FileProblemView => ({ path: 'file', sheet: null, cell: null, ...problem });

/**
 * Everything that stands between a kept file and its being stored: what cannot be read, every problem by sheet and cell, and the
 * values on record that it would cover.
 */
export async function standingOfFile(
  study: Pick<Study, 'id' | 'labId'>,
  kept: Readonly<{ id: string; fileName: string; declared: unknown }>
): Promise<readonly FileProblemView[]> {
  const reading = await readKeptFile(study, kept);
  if (reading.kind === 'refused') {
    return [
      aboutFile({
        severity: 'error',
        code: 'unreadable',
        found: kept.fileName,
        expected: 'a workbook (.xlsx) or a table as text (.csv, .tsv)',
        message: reading.sentence,
        fix: 'Save the table of values anew and bring that file.',
        answer: null
      })
    ];
  }
  const { mapped, expectation } = reading;
  const problems = mapped.problems.map(problemView);
  if (mapped.records.length === 0 && !problems.some(({ severity }) => severity !== 'note')) {
    problems.unshift(
      aboutFile({
        severity: 'error',
        code: 'nothing-to-store',
        found: kept.fileName,
        expected: 'values of samples and analytes of this study',
        message: 'Nothing in this file belongs to the study, so there is nothing to store.',
        fix: 'Compare its sample and analyte names with the data template of the experiment.',
        answer: null
      })
    );
  }
  const covered = await coveredPlaces(study, mapped.records, expectation);
  if (covered.count === 0) return problems;
  return [
    ...problems,
    aboutFile({
      severity: 'question',
      code: 'values-covered',
      found: `${covered.count} values on record (${covered.fileNames.join(', ')})`,
      expected: 'a reason, in a few words',
      message: `${covered.count} values that are on record (${covered.fileNames.join(', ')}) would be covered by this file. Say why.`,
      fix: 'Send the file again with the parameter "reason".',
      answer: 'reason'
    })
  ];
}
