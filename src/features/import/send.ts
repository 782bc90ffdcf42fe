import { ApiError, errorOf } from '../../lib/api';
import { linesOf } from '../../lib/ndjson';
import type { ImportBody, ImportLine, ImportOutcome } from '../../schemas/api/import';
import type { ImportStep } from '../../schemas/lists-and-limits';
import { paths } from '../../schemas/paths';
import { importSend } from '../../words/import';

export interface Progress {
  step: ImportStep;
  done: number;
  of: number;
}

const BROKEN = new ApiError(0, importSend.theConnectionBrokeBefore, importSend.nothingIsHalfDone);

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
    for await (const line of linesOf<ImportLine>(response.body)) {
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
