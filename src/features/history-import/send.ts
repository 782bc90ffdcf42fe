import { api, ApiError, errorOf } from '../../lib/api';
import { linesOf } from '../../lib/ndjson';
import type { HistoryImportView, HistoryLine, HistoryStep } from '../../schemas/api/history-import';
import { paths } from '../../schemas/paths';
import { historyImportSend } from '../../words/history-import';

const BROKEN = new ApiError(
  0,
  historyImportSend.theConnectionBrokeBefore,
  historyImportSend.nothingIsHalfDone,
);

/**
 * Sends a file and tells the progress.
 * @throws ApiError as the server says; status 0 where the connection broke
 */
export async function sendHistory(
  site: string,
  body: Blob,
  onProgress: (step: HistoryStep, share: number) => void,
  signal: AbortSignal,
): Promise<HistoryImportView> {
  try {
    const response = await fetch(paths.api.historyImports(site), {
      method: 'POST',
      headers: { accept: 'application/x-ndjson', 'content-type': 'application/octet-stream' },
      credentials: 'same-origin',
      body,
      signal,
    });
    if (!response.ok || !response.body) throw await errorOf(response);
    for await (const line of linesOf<HistoryLine>(response.body)) {
      if ('progress' in line)
        onProgress(line.progress.step, line.progress.done / Math.max(1, line.progress.of));
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

export const takeBack = (site: string, made: string, reason: string): Promise<HistoryImportView> =>
  api(paths.api.historyImportUndo(site, made), { method: 'POST', body: { reason } });
