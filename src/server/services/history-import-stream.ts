import type { Actor } from '../../domain/access/permissions';
import type { HistoryImportView, HistoryLine } from '../../schemas/api/history-import';
import { HISTORY_FILE_MAX_BYTES } from '../../schemas/lists-and-limits';
import { asActor } from '../db/transaction';
import { AppError, found } from '../errors';
import { spool } from '../files/spool';
import { problem } from '../http/problem';
import { visibleSite } from '../queries/visible-site';
import { importHistory, type OnHistoryStep } from './history-import';
import { historyStreamRefusals } from '../../words/refusals-history';

const NDJSON = 'application/x-ndjson';

/** The person has gone: whatever has been written so far is rolled back with the transaction. */
class GivenUp extends Error {}

interface Asked {
  siteRef: string;
  request: Request;
  address: string;
  requestId: string;
}

/** Imports that one process does at a time: each keeps a connection and a core busy. */
const AT_ONCE = 2;
let running = 0;

const turn = (): Promise<void> => new Promise((resolve) => setImmediate(resolve));

/**
 * Takes a file and answers with its import: as one JSON document, or, where the caller takes lines, with its progress as
 * it goes. The transaction ends before the last line is sent; a caller who goes away before that leaves nothing behind.
 * @throws AppError not_found · too_large · unavailable (others import) and, without lines, as importHistory says
 */
export async function answerHistoryImport(actor: Actor, asked: Asked, at: Date): Promise<Response> {
  await asActor(actor, async (tx) => found(await visibleSite(tx, asked.siteRef), 'site'));
  if (running >= AT_ONCE)
    throw new AppError('unavailable', {
      message: historyStreamRefusals.othersImport,
      retryAfterS: 30,
    });
  running++;
  try {
    const file = await spool(asked.request, HISTORY_FILE_MAX_BYTES, historyStreamRefusals.inParts);
    running++; // the work goes on when this function has answered
    const run = async (onStep: OnHistoryStep): Promise<HistoryImportView> => {
      try {
        return await asActor(actor, (tx) =>
          importHistory(tx, actor, asked.siteRef, file, { at, address: asked.address }, onStep),
        );
      } finally {
        running--;
        await file.remove();
      }
    };
    if (asked.request.headers.get('accept')?.includes(NDJSON)) return lines(run, asked.requestId);
    return Response.json(await run(turn), { headers: { 'cache-control': 'no-store' } });
  } finally {
    running--;
  }
}

function lines(run: (onStep: OnHistoryStep) => Promise<HistoryImportView>, requestId: string): Response {
  const encoder = new TextEncoder();
  let gone = false;
  const stream = new ReadableStream<Uint8Array>({
    async start(controller) {
      const say = (line: HistoryLine) => {
        if (!gone) controller.enqueue(encoder.encode(`${JSON.stringify(line)}\n`));
      };
      try {
        const outcome = await run(async (step, done, of) => {
          say({ progress: { step, done, of } });
          await turn(); // lets the line leave, and the news that nobody listens any more come in
          if (gone) throw new GivenUp();
        });
        say({ outcome });
      } catch (error) {
        if (error instanceof GivenUp) return;
        const told = problem(error, requestId);
        say({ problem: (await told.json()) as Extract<HistoryLine, { problem: unknown }>['problem'] });
      }
      if (!gone) controller.close();
    },
    cancel() {
      gone = true;
    },
  });
  return new Response(stream, {
    headers: { 'content-type': NDJSON, 'cache-control': 'no-store', 'x-accel-buffering': 'no' },
  });
}
