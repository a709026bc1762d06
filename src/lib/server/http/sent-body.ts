import { TooLarge } from '../errors';

const megabytes = (bytes: number): string => `${Math.round(bytes / 1024 / 1024)} MB`;

/** True for what the adapter refuses by itself while it reads a body: more than it takes. */
const isAdapterLimit = (error: unknown): boolean =>
  typeof error === 'object' && error !== null && Reflect.get(error, 'status') === 413;

/**
 * Reads a body while counting, so that no more than the limit is ever held; a body that says beforehand that it is larger is
 * not read at all.
 * @throws TooLarge
 */
export async function readBody(request: Request, limitBytes: number): Promise<Buffer> {
  const tooLarge = (): TooLarge =>
    new TooLarge(
      `What was sent is larger than this lab takes (${megabytes(limitBytes)}). Bring the table of values alone.`
    );
  if (Number(request.headers.get('content-length') ?? 0) > limitBytes) throw tooLarge();
  if (request.body === null) return Buffer.alloc(0);
  const pieces: Uint8Array[] = [];
  let size = 0;
  const reader = request.body.getReader();
  try {
    for (;;) {
      const { done, value } = await reader.read();
      if (done) return Buffer.concat(pieces, size);
      size += value.byteLength;
      if (size > limitBytes) throw tooLarge();
      pieces.push(value);
    }
  } catch (error) {
    if (isAdapterLimit(error)) throw tooLarge();
    throw error;
  }
}
