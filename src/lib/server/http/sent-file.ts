import { Invalid, Unsupported } from '../errors';
import { readBody } from './sent-body';

/** A file that came in a request, and the parameters that came with it. */
export interface Sent {
  readonly fileName: string;
  readonly bytes: Buffer;
  /** Of the address and of the form, without `file`. */
  readonly parameters: Readonly<Record<string, string>>;
}

/** What surrounds a file in a form. */
const formMargin = 64 * 1024;

const tableTypes: ReadonlySet<string> = new Set([
  'application/octet-stream',
  'application/vnd.openxmlformats-officedocument.spreadsheetml.sheet',
  // What some systems call a CSV file.
  'application/vnd.ms-excel',
  'text/csv',
  'text/tab-separated-values',
  'text/plain'
]);

/**
 * The file of a request: the body itself with its name in the address, or the field `file` of a form.
 * @param limitBytes of the file
 * @throws Unsupported for a body of another kind; TooLarge; Invalid without a file or its name, or for a parameter given twice
 */
export async function sentFile(
  { request, url }: Readonly<{ request: Request; url: URL }>,
  limitBytes: number
): Promise<Sent> {
  const parameters = onceEach([...url.searchParams]);
  const type = (request.headers.get('content-type') ?? '').split(';')[0]?.trim().toLowerCase() ?? '';
  if (type === 'multipart/form-data') return fromForm(request, limitBytes, parameters);
  if (!tableTypes.has(type)) {
    throw new Unsupported(
      `Send the file as the body with "Content-Type: application/octet-stream", or as the field "file" of a form (multipart/form-data). ${
        type === '' ? 'No type was named' : `The type was "${type}"`
      }.`
    );
  }
  const { file, ...others } = parameters;
  const fileName = file?.trim() ?? '';
  if (fileName === '') {
    throw Invalid.at('file', 'Name the file in the address: ?file=areas.xlsx', { expected: 'a file name' });
  }
  return { fileName, bytes: await readBody(request, limitBytes), parameters: others };
}

async function fromForm(
  request: Request,
  limitBytes: number,
  inAddress: Readonly<Record<string, string>>
): Promise<Sent> {
  const body = await readBody(request, limitBytes + formMargin);
  const form = await new Response(new Uint8Array(body), {
    headers: { 'content-type': request.headers.get('content-type') ?? '' }
  })
    .formData()
    .catch(() => {
      throw Invalid.at('file', 'The form cannot be read as it was sent.', {
        expected: 'multipart/form-data'
      });
    });
  const entries = [...form];
  const files = entries.filter((entry): entry is [string, File] => typeof entry[1] !== 'string');
  const [first] = files;
  if (!first || files.length > 1 || first[0] !== 'file') {
    throw Invalid.at('file', 'Send one file, in the field "file".', { found: `${files.length} files` });
  }
  const fields = entries.filter((entry): entry is [string, string] => typeof entry[1] === 'string');
  const { file: named, ...parameters } = onceEach([...Object.entries(inAddress), ...fields]);
  const bytes = Buffer.from(await first[1].arrayBuffer());
  return { fileName: named?.trim() || first[1].name, bytes, parameters };
}

/** @throws Invalid for a name that stands twice: which of the two is meant cannot be told */
function onceEach(entries: readonly (readonly [string, string])[]): Record<string, string> {
  const named = new Map<string, string>();
  for (const [name, value] of entries) {
    if (named.has(name)) throw Invalid.at(name, `The parameter "${name}" was given twice.`, { found: value });
    named.set(name, value);
  }
  return Object.fromEntries(named);
}
