import type { Actor } from '../../domain/access/permissions';
import type { ImportLine, ImportOrder, ImportOutcome } from '../../schemas/api/import';
import { asActor } from '../db/transaction';
import { problem } from '../http/problem';
import { importAsBuilt } from './import-as-built';

const NDJSON = 'application/x-ndjson';

/** The person has gone: whatever has been written so far is rolled back with the transaction. */
class GivenUp extends Error {}

interface Asked {
  siteRef: string;
  order: ImportOrder;
  address: string;
  requestId: string;
  accept: string;
}

const turn = (): Promise<void> => new Promise((resolve) => setImmediate(resolve));

/**
 * Answers an import: as one JSON document, or, where the caller takes lines, with its progress as it goes. The work has
 * a transaction of its own, which ends before the last line is sent; a caller who goes away before that leaves the
 * as-built as it was.
 */
export async function answerImport(actor: Actor, asked: Asked, at: Date): Promise<Response> {
  const run = (onStep: Parameters<typeof importAsBuilt>[5]): Promise<ImportOutcome> =>
    asActor(actor, (tx) =>
      importAsBuilt(tx, actor, asked.siteRef, asked.order, { at, address: asked.address }, onStep),
    );
  if (!asked.accept.includes(NDJSON))
    return Response.json(await run(turn), { headers: { 'cache-control': 'no-store' } });

  const encoder = new TextEncoder();
  let gone = false;
  const stream = new ReadableStream<Uint8Array>({
    async start(controller) {
      const say = (line: ImportLine) => {
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
        const told = problem(error, asked.requestId);
        say({ problem: (await told.json()) as Extract<ImportLine, { problem: unknown }>['problem'] });
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
