import { ApiError, errorOf } from '../../lib/api';
import type { ImportBody, ImportLine, ImportOutcome, ImportStep } from '../../schemas/api/import';
import { paths } from '../../schemas/paths';

export interface Progress {
  step: ImportStep;
  done: number;
  of: number;
}

const BROKEN = new ApiError(
  0,
  'The connection broke before the server had answered',
  'Nothing is half done: either all of the file is in the as-built or nothing of it. Check the file again to see which.',
);

/** The lines of an answer one by one. */
async function* linesOf(body: ReadableStream<Uint8Array>): AsyncGenerator<ImportLine> {
  const reader = body.pipeThrough(new TextDecoderStream() as TransformStream<Uint8Array, string>).getReader();
  let rest = '';
  for (;;) {
    const { done, value } = await reader.read();
    if (done) break;
    const lines = (rest + value).split('\n');
    rest = lines.pop() ?? '';
    for (const line of lines) if (line.trim() !== '') yield JSON.parse(line) as ImportLine;
  }
  if (rest.trim() !== '') yield JSON.parse(rest) as ImportLine;
}

/**
 * Sends an import and tells its progress.
 * @throws ApiError as the server says, with `rows.LINE.COLUMN` in its fields; status 0 where the connection broke
 */
export async function sendImport(
  site: string,
  body: ImportBody,
  onProgress: (progress: Progress) => void,
  signal?: AbortSignal,
): Promise<ImportOutcome> {
  try {
    const response = await fetch(paths.api.asBuiltImport(site), {
      method: 'POST',
      headers: { accept: 'application/x-ndjson', 'content-type': 'application/json' },
      credentials: 'same-origin',
      body: JSON.stringify(body),
      ...(signal ? { signal } : {}),
    });
    if (!response.ok || !response.body) throw await errorOf(response);
    for await (const line of linesOf(response.body)) {
      if ('progress' in line) onProgress(line.progress);
      else if ('outcome' in line) return line.outcome;
      else {
        const { status, title, detail, fields, requestId } = line.problem;
        throw new ApiError(status, title, detail, fields, requestId);
      }
    }
  } catch (error) {
    if (error instanceof ApiError || (error instanceof DOMException && error.name === 'AbortError'))
      throw error;
    throw BROKEN;
  }
  throw BROKEN;
}
