/** A download with its name, plain and in RFC 6266's extended form for names beyond ASCII. Never rendered by a browser. */
export function attachment(fileName: string, bytes: Uint8Array, type: string): Response {
  const plain = fileName.replace(/[^\x20-\x7e]|["\\]/g, '_');
  const extended = encodeURIComponent(fileName).replace(
    /['()*]/g,
    (character) => `%${character.charCodeAt(0).toString(16).toUpperCase()}`
  );
  return new Response(new Uint8Array(bytes), {
    headers: {
      'content-type': type,
      'content-disposition': `attachment; filename="${plain}"; filename*=UTF-8''${extended}`,
      'content-length': String(bytes.byteLength),
      'cache-control': 'private, no-store',
      'x-content-type-options': 'nosniff'
    }
  });
}

export const xlsxType = 'application/vnd.openxmlformats-officedocument.spreadsheetml.sheet';
