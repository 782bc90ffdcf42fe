/** Endings by what a file was found to be, not by its name. */
const ENDINGS: Record<string, string> = { 'image/jpeg': 'jpg', 'application/pdf': 'pdf' };

/** A name that a header and a file system can carry, with the ending that fits. */
export function fileName(name: string, mediaType: string): string {
  const plain =
    name
      .replace(/\.[A-Za-z0-9]{1,5}$/, '')
      .normalize('NFKD')
      .replace(/\p{M}/gu, '')
      .replace(/[^A-Za-z0-9._-]+/g, '-')
      .replace(/^[-.]+|-+$/g, '') || 'file';
  return `${plain.slice(0, 80)}.${ENDINGS[mediaType] ?? 'bin'}`;
}

/**
 * A stored file. It is what it is said to be, runs nothing, and is kept by the reader's own browser only. A file never
 * changes: its tag is its identifier.
 */
export function fileReply(
  request: Request,
  file: { name: string; mediaType: string; data: Buffer },
  tag: string,
): Response {
  const headers = {
    'content-type': file.mediaType,
    'x-content-type-options': 'nosniff',
    'content-security-policy': "default-src 'none'; frame-ancestors 'none'; sandbox",
    'cross-origin-resource-policy': 'same-origin',
    'content-disposition': `${file.mediaType === 'image/jpeg' ? 'inline' : 'attachment'}; filename="${fileName(file.name, file.mediaType)}"`,
    'cache-control': 'private, max-age=3600',
    vary: 'cookie',
    etag: tag,
  };
  if (request.headers.get('if-none-match') === tag) return new Response(null, { status: 304, headers });
  return new Response(new Uint8Array(file.data), { headers });
}
