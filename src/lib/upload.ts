import { apiSaid } from '../words/browser';
import { ApiError, errorOf } from './api';

/** Nothing heard for this long, ms: the network is gone. */
const SILENT_MS = 60_000;

/**
 * Sends a file as the body of a POST and tells how much of it is sent. By XMLHttpRequest: fetch does not say.
 * @throws ApiError as `api`
 */
export function uploadFile<T>(
  path: string,
  file: Blob,
  progress: (share: number) => void,
  headers: Record<string, string> = {},
): Promise<T> {
  return new Promise((resolve, reject) => {
    const request = new XMLHttpRequest();
    let silence: ReturnType<typeof setTimeout> | undefined;
    const listen = () => {
      clearTimeout(silence);
      silence = setTimeout(() => request.abort(), SILENT_MS);
    };
    const broken = () => reject(new ApiError(0, apiSaid.outOfReach, apiSaid.uploadBroken));
    request.open('POST', path);
    request.setRequestHeader('accept', 'application/json');
    request.setRequestHeader('content-type', file.type || 'application/octet-stream');
    for (const [name, value] of Object.entries(headers)) request.setRequestHeader(name, value);
    request.upload.onprogress = (event) => {
      listen();
      if (event.lengthComputable) progress(event.loaded / event.total);
    };
    request.onabort = broken;
    request.onerror = broken;
    request.onload = () => {
      const retryAfter = request.getResponseHeader('retry-after');
      const response = new Response(request.responseText, {
        status: request.status,
        headers: retryAfter ? { 'retry-after': retryAfter } : {},
      });
      if (response.ok) response.json().then((body) => resolve(body as T), broken);
      else errorOf(response).then(reject, reject);
    };
    request.onloadend = () => clearTimeout(silence);
    listen();
    request.send(file);
  });
}
