import { buffer } from 'node:stream/consumers';
import { demoLabel } from '../../domain/cautions';
import type { Actor } from '../../domain/actor';
import { Invalid } from '../errors';
import { annotatedCopy, annotatedLimits } from '../reports/annotated-copy';
import { readKeptFile } from './import-reading';
import { importOfStudy } from './imports';
import { require } from './permissions';
import { studyOf } from './study-of';

/**
 * A copy of a received file with every problem noted at its cell, as XLSX.
 * @throws Invalid for a file that cannot be read or is too large to be copied; NotFound
 */
export async function annotatedImport(
  actor: Actor,
  studyCode: string,
  importId: string
): Promise<Readonly<{ fileName: string; bytes: Buffer }>> {
  require(actor, 'studies.see');
  const study = await studyOf(actor, studyCode);
  const kept = await importOfStudy(actor, study, importId);
  const reading = await readKeptFile(study, kept);
  if (reading.kind === 'refused') throw Invalid.at('file', reading.sentence);
  const { workbook, mapped } = reading;
  const cells = workbook.sheets.reduce((sum, sheet) => sum + sheet.values.length, 0);
  if (cells > annotatedLimits.cells) {
    throw Invalid.at(
      'file',
      `${kept.fileName} has ${cells} filled cells; a copy is made of files of up to ${annotatedLimits.cells}. The list of problems on the page names each cell.`
    );
  }
  const about = [
    `${kept.fileName}, as ${study.code} read it: a copy with its problems noted. The file itself is kept as it came.`,
    ...(actor.labIsDemo ? [demoLabel] : [])
  ];
  return {
    fileName: `${kept.fileName.replace(/\.[A-Za-z]{2,4}$/, '')}-to-mend.xlsx`,
    bytes: await buffer(annotatedCopy(workbook, mapped.problems, about))
  };
}
