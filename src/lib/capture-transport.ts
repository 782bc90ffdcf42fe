import { phoneStoreSaid } from '../words/browser';
import { PERSON_HEADER } from '../schemas/lists-and-limits';
import { paths } from '../schemas/paths';
import { api, ApiError, withQuery, type QueryValue } from './api';
import type { Answer, Problem, Waiting } from './capture-queue';
import type { KeptPhoto } from './capture-store';
import { uploadFile } from './upload';

/** Hands one record to the server and says what its answer means for the queue. */

const ANSWER_WITHIN_MS = 30_000;

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
  if (!photo) throw new ApiError(422, phoneStoreSaid.photoGone, phoneStoreSaid.photoGoneRemedy);
  const url = withQuery(paths.api.attachments(record.site), record.body as Record<string, QueryValue>);
  const file = new Blob([photo.bytes], { type: photo.type });
  const share = (sent: number) => transport.progress?.(record.ref, sent);
  return uploadFile(url, file, share, { [PERSON_HEADER]: record.person });
}
