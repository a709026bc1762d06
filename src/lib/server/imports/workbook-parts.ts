import type { Archive } from './archive';
import type { ReadingLimits } from './limits';
import { damaged, outOfProportion, Refusal } from './refusal';
import { scanXml } from './scan-xml';

export interface WorkbookParts {
  readonly sheets: readonly { readonly name: string; readonly hidden: boolean; readonly part: string }[];
  readonly sharedStrings: string | null;
  readonly styles: string | null;
  readonly countsFrom1904: boolean;
}

interface Relation {
  readonly id: string;
  /** The last step of its type, which the two published editions of the format share. */
  readonly kind: string;
  readonly part: string;
}

/**
 * Follows the relations of the archive to the workbook's parts.
 *
 * @throws Refusal when there is no workbook in the archive
 */
export async function findWorkbookParts(archive: Archive, limits: ReadingLimits): Promise<WorkbookParts> {
  const workbook = await findWorkbook(archive, limits);
  const relations = await readRelations(archive, relationsOf(workbook), folderOf(workbook), limits);
  const named: { name: string; hidden: boolean; relation: string }[] = [];
  let countsFrom1904 = false;
  let root = '';
  await scanXml(archive, workbook, limits, {
    open(name, attributes) {
      root ||= name;
      if (name === 'workbookPr')
        countsFrom1904 = attributes.date1904 === '1' || attributes.date1904 === 'true';
      if (name !== 'sheet') return;
      named.push({
        name: attributes.name ?? '',
        hidden: attributes.state === 'hidden' || attributes.state === 'veryHidden',
        relation: Object.entries(attributes).find(([key]) => key.endsWith(':id'))?.[1] ?? ''
      });
    }
  });
  if (root !== 'workbook') throw notAWorkbook();
  if (named.length > limits.sheets) {
    throw outOfProportion(`This workbook has ${named.length} sheets; at most ${limits.sheets} are read.`);
  }
  const sheets = named.flatMap(({ name, hidden, relation }) => {
    const found = relations.find(({ id, kind }) => id === relation && kind === 'worksheet');
    return found ? [{ name, hidden, part: found.part }] : [];
  });
  if (new Set(sheets.map(({ part }) => part)).size < sheets.length)
    throw damaged('two of its sheets are the same part');
  return {
    sheets,
    sharedStrings: relations.find(({ kind }) => kind === 'sharedStrings')?.part ?? null,
    styles: relations.find(({ kind }) => kind === 'styles')?.part ?? null,
    countsFrom1904
  };
}

async function findWorkbook(archive: Archive, limits: ReadingLimits): Promise<string> {
  if (archive.has('content.xml') && archive.has('mimetype')) {
    throw new Refusal(
      'other format',
      'This is an OpenDocument file. Save it as .xlsx or .csv and bring that.'
    );
  }
  if (!archive.has('_rels/.rels')) throw notAWorkbook();
  const [main] = (await readRelations(archive, '_rels/.rels', '', limits)).filter(
    ({ kind }) => kind === 'officeDocument'
  );
  if (!main) throw notAWorkbook();
  if (main.part.endsWith('.bin')) {
    throw new Refusal(
      'other format',
      'This is a binary workbook (.xlsb). Save it as .xlsx or .csv and bring that.'
    );
  }
  return main.part;
}

function notAWorkbook(): Refusal {
  return new Refusal(
    'not a workbook',
    'This is an archive, but there is no workbook in it. Nothing was stored.'
  );
}

async function readRelations(
  archive: Archive,
  part: string,
  folder: string,
  limits: ReadingLimits
): Promise<readonly Relation[]> {
  const relations: Relation[] = [];
  if (!archive.has(part)) return relations;
  await scanXml(archive, part, limits, {
    open(name, attributes) {
      if (name !== 'Relationship' || attributes.TargetMode === 'External') return;
      relations.push({
        id: attributes.Id ?? '',
        kind: (attributes.Type ?? '').replace(/^.*\//, ''),
        part: resolvePart(folder, attributes.Target ?? '')
      });
    }
  });
  return relations;
}

function folderOf(part: string): string {
  return part.slice(0, part.lastIndexOf('/') + 1);
}

function relationsOf(part: string): string {
  const folder = folderOf(part);
  return `${folder}_rels/${part.slice(folder.length)}.rels`;
}

function resolvePart(folder: string, target: string): string {
  return new URL(target, `part:///${folder}`).pathname.slice(1);
}
