import type { ImportListView } from './imports';

/** The parameter of the next request that answers a question. */
export const questionAnswers = ['confirm', 'basis', 'decimal', 'reason'] as const;
export type QuestionAnswer = (typeof questionAnswers)[number];

/** One thing to know about a file that a program brought: by sheet and cell, found, expected, and how to mend it. */
export interface FileProblemView {
  /** Sheet and cell in one: "Carbon!F18"; "file" for what concerns all of it. */
  readonly path: string;
  /** Errors keep the file from being stored, questions want an answer first, notes inform. */
  readonly severity: 'error' | 'question' | 'note';
  /** A stable word for programs: "not-a-number". */
  readonly code: string;
  readonly sheet: string | null;
  readonly cell: string | null;
  readonly found: string;
  readonly expected: string;
  readonly message: string;
  readonly fix: string;
  /** With which parameter a question is answered; null for errors and notes. */
  readonly answer: QuestionAnswer | null;
}

/** An import as programs see it. */
export type ImportFacts = Omit<ImportListView, 'mayWithdraw'>;

/** What came of a file that a program brought. */
export interface BroughtFileView {
  /** `known`: the very same bytes are stored already, and nothing changed. */
  readonly outcome: 'stored' | 'received' | 'known';
  readonly import: ImportFacts;
  /** What has to be answered before it can be stored. */
  readonly questions: readonly FileProblemView[];
  readonly notes: readonly FileProblemView[];
}

/** One import with what its file says now; `problems` is empty for one that no longer waits. */
export interface ImportDetailView {
  readonly import: ImportFacts;
  readonly problems: readonly FileProblemView[];
}
