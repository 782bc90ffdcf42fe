import { z } from 'zod';
import { id } from './now';

/** Letters of the outbox, newest first. Times ISO 8601 in UTC. */
const time = z.iso.datetime();

export const letterItem = z.object({
  ref: id,
  kind: z.string(),
  to: z.string(),
  subject: z.string(),
  createdAt: time,
  sentAt: time.nullable(),
  givenUpAt: time.nullable(),
  notBefore: time, // the next try, while it waits
  attempts: z.int(),
  lastError: z.string().nullable(),
  received: z.object({ at: time, text: z.string(), html: z.string() }).nullable(), // by the demo's local post
});
export type LetterItem = z.infer<typeof letterItem>;

export const lettersPage = z.object({
  at: time,
  sending: z.boolean(), // a way out is set
  localPost: z.boolean(), // letters stay on this machine
  letters: z.array(letterItem),
});
export type LettersPage = z.infer<typeof lettersPage>;
