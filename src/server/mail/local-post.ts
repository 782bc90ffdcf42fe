import { randomUUID } from 'node:crypto';
import { mkdir, readdir, readFile, rename, writeFile } from 'node:fs/promises';
import path from 'node:path';
import { simpleParser } from 'mailparser';
import { SMTPServer } from 'smtp-server';
import { z } from 'zod';

/**
 * A mail server for the demo and for tests: it takes every letter, sends none on and keeps each as a file. Bound to
 * this machine.
 */
const receivedLetter = z.object({
  id: z.string(),
  at: z.iso.datetime(),
  messageId: z.string(),
  from: z.string(),
  to: z.string(),
  subject: z.string(),
  text: z.string(),
  html: z.string(), // pictures inside it, as data
  /** Header lines by their names in small letters. */
  headers: z.record(z.string(), z.string()).default({}),
  attachments: z.array(z.object({ cid: z.string(), type: z.string(), bytes: z.int() })).default([]),
});
export type ReceivedLetter = z.infer<typeof receivedLetter>;

const LARGEST_BYTES = 25 * 1024 * 1024;

export interface LocalPost {
  port: number;
  stop(): Promise<void>;
}

export async function startLocalPost(folder: string, port = 0): Promise<LocalPost> {
  await mkdir(folder, { recursive: true });
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS', 'AUTH'],
    size: LARGEST_BYTES,
    onData: (stream, session, done) => {
      void (async () => {
        const mail = await simpleParser(stream);
        const at = new Date();
        const id = `${at.toISOString().replaceAll(/[:.]/g, '-')}-${randomUUID().slice(0, 8)}`;
        const letter: ReceivedLetter = {
          id,
          at: at.toISOString(),
          messageId: mail.messageId ?? '',
          from: mail.from?.text ?? '',
          to: session.envelope.rcptTo.map((r) => r.address).join(', '),
          subject: mail.subject ?? '',
          text: mail.text ?? '',
          html: mail.html || '',
          headers: Object.fromEntries(
            mail.headerLines.map(({ key, line }) => [key, line.slice(line.indexOf(':') + 1).trim()]),
          ),
          attachments: mail.attachments.map((a) => ({
            cid: a.cid ?? '',
            type: a.contentType,
            bytes: a.size,
          })),
        };
        // whole or not at all: a reader never meets half a file
        const file = path.join(folder, `${id}.json`);
        await writeFile(`${file}.part`, JSON.stringify(letter));
        await rename(`${file}.part`, file);
      })().then(
        () => done(),
        (error: unknown) => done(error instanceof Error ? error : new Error(String(error))),
      );
    },
  });
  await new Promise<void>((resolve, reject) => {
    server.once('error', reject);
    server.listen(port, '127.0.0.1', resolve);
  });
  server.on('error', () => undefined); // a client that breaks off is none of ours
  const address = server.server.address();
  return {
    port: typeof address === 'object' && address ? address.port : port,
    stop: () => new Promise((resolve) => server.close(() => resolve())),
  };
}

/** What the local post took, newest first; at most `limit`. */
export async function lettersReceived(folder: string, limit = 100): Promise<ReceivedLetter[]> {
  let names: string[];
  try {
    names = await readdir(folder);
  } catch (error) {
    if ((error as { code?: unknown }).code === 'ENOENT') return []; // nothing came yet
    throw error;
  }
  const newest = names
    .filter((name) => name.endsWith('.json'))
    .sort()
    .reverse()
    .slice(0, limit);
  const letters: ReceivedLetter[] = [];
  for (const name of newest) {
    const read = receivedLetter.safeParse(JSON.parse(await readFile(path.join(folder, name), 'utf8')));
    if (read.success) letters.push(read.data);
  }
  return letters;
}
