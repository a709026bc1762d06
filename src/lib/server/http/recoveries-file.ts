import type { Actor } from '../../domain/actor';
import type { ResultsTableView } from '../../views/findings';
import { NotFound } from '../errors';
import { resultsCsv } from '../reports/results-csv';
import { attachment } from './attachment';

/** The method recoveries of one experiment as a CSV download, unrounded. @throws NotFound where there is no experiment */
export function recoveriesFile(actor: Actor, study: string, results: ResultsTableView | null): Response {
  if (!results) throw new NotFound('The study has no experiment yet.');
  const text = resultsCsv(results, { study, labName: actor.labName, labIsDemo: actor.labIsDemo });
  const name = `${study}-experiment-${results.experiment.number}-recoveries.csv`;
  return attachment(name, new TextEncoder().encode(text), 'text/csv; charset=utf-8');
}
