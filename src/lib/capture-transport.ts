import { PERSON_HEADER } from '../schemas/api/capture';
import { paths } from '../schemas/paths';
import { api, ApiError, errorOf, withQuery, type QueryValue } from './api';
import type { Answer, Problem, Waiting } from './capture-queue';
import type { KeptPhoto } from './capture-store';

/** Hands one record to the server and says what its answer means for the queue. */

const ANSWER_WITHIN_MS = 30_000;
/** A photo over a bad connection: slow is not broken, but a minute without a byte is. */
const SILENT_MS = 60_000;

const problemOf = (error: ApiError): Problem => ({
  title: error.title,
  message: error.message,
  fields: error.fields,
});

/** What a failure means: whether it goes again by itself, waits for a person, or for another sign-in. */
export function answerOf(error: unknown): Answer {
  if (!(error instanceof ApiError)) return { kind: 'unreachable' };
  const { status } = error;
  if (status === 0) return { kind: 'unreachable' };
  if (status === 401) return { kind: 'signed_out' };
  if (status === 403 && error.fault(PERSON_HEADER)) return { kind: 'other_person' };
  if (status === 409 && error.current !== null)
    return { kind: 'conflict', current: error.current, problem: problemOf(error) };
  if (status === 408 || status === 425 || status === 429 || status >= 500)
    return { kind: 'busy', retryAfterS: error.retryAfterS };
  return { kind: 'refused', problem: problemOf(error) };
}

export interface Transport {
  photo: (ref: string) => Promise<KeptPhoto | null>;
  /** What the server has stored of it, before it leaves the queue. */
  stored: (record: Waiting, answer: unknown) => Promise<void>;
  /** Share of a photo's bytes that are sent, 0 … 1. */
  progress?: (ref: string, share: number) => void;
}

/** Sends a record; every failure comes back as an answer. */
export async function sendRecord(record: Waiting, transport: Transport): Promise<Answer> {
  let stored: unknown;
  try {
    stored = await (record.kind === 'photo'
      ? sendPhoto(record, transport)
      : api(record.kind === 'reading' ? paths.api.readings(record.site) : paths.api.checks(record.site), {
          method: 'POST',
          body: record.body,
          headers: { [PERSON_HEADER]: record.person },
          signal: AbortSignal.timeout(ANSWER_WITHIN_MS),
        }));
  } catch (error) {
    return answerOf(error);
  }
  await transport.stored(record, stored);
  return { kind: 'stored' };
}

async function sendPhoto(record: Waiting, transport: Transport): Promise<unknown> {
  const photo = await transport.photo(record.ref);
  if (!photo)
    throw new ApiError(
      422,
      'The photo is gone',
      'Its bytes are no longer on this phone. Take it again, or leave it out.',
    );
  const url = withQuery(paths.api.attachments(record.site), record.body as Record<string, QueryValue>);
  return upload(url, photo, record.person, (share) => transport.progress?.(record.ref, share));
}

/** By XMLHttpRequest: fetch does not tell how much of a body is sent. */
function upload(
  url: string,
  photo: KeptPhoto,
  person: string,
  progress: (share: number) => void,
): Promise<unknown> {
  return new Promise((resolve, reject) => {
    const request = new XMLHttpRequest();
    let silence: ReturnType<typeof setTimeout> | undefined;
    const broken = () => reject(new ApiError(0, 'The server is out of reach', 'No answer came.'));
    const listen = () => {
      clearTimeout(silence);
      silence = setTimeout(() => request.abort(), SILENT_MS);
    };
    request.open('POST', url);
    request.setRequestHeader('accept', 'application/json');
    request.setRequestHeader('content-type', photo.type || 'application/octet-stream');
    request.setRequestHeader(PERSON_HEADER, person);
    request.upload.onprogress = (event) => {
      listen();
      if (event.lengthComputable) progress(event.loaded / event.total);
    };
    request.onabort = broken;
    request.onerror = broken;
    request.onload = () => {
      const body = request.status === 204 ? null : request.responseText;
      const retryAfter = request.getResponseHeader('retry-after');
      const response = new Response(body, {
        status: request.status,
        headers: retryAfter ? { 'retry-after': retryAfter } : {},
      });
      if (!response.ok) errorOf(response).then(reject, reject);
      else if (body === null) resolve(undefined);
      else response.json().then(resolve, broken);
    };
    request.onloadend = () => clearTimeout(silence);
    listen();
    request.send(photo.bytes);
  });
}
