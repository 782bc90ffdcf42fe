import { z } from 'zod';
import { CLOCK_AHEAD_MAX_S, hello, PROTOCOL } from '../../schemas/ingest';
import type { ErrorKind } from '../errors';
import { shown } from './check';

/** What a hello came to: the firmware's name, or what is wrong with it and whether the connection can go on. */
export type ReadHello =
  | { ok: true; firmware: string }
  | {
      ok: false;
      field: string;
      reason: string;
      again: boolean;
      /** What ends the connection; null: the logger may say hello again. */
      end: { kind: ErrorKind; reason: string } | null;
    };

const versionOnly = z.object({ type: z.literal('hello'), protocol: z.unknown() });

/** A hello of the logger whose token it was. `nowS`: the server's clock, epoch seconds. */
export function readHello(value: Record<string, unknown>, serial: string, nowS: number): ReadHello {
  // a later version may look different altogether: its number comes first
  const version = versionOnly.safeParse(value);
  if (version.success && version.data.protocol !== PROTOCOL)
    return {
      ok: false,
      field: 'protocol',
      reason: `this server speaks version ${PROTOCOL}; the logger said ${shown(version.data.protocol)}`,
      again: false,
      end: { kind: 'invalid', reason: `protocol version ${PROTOCOL} only` },
    };
  const parsed = hello.safeParse(value);
  if (!parsed.success) {
    const issue = parsed.error.issues[0];
    return {
      ok: false,
      field: issue?.path.join('.') || 'message',
      reason: issue?.message ?? 'is no hello',
      again: true,
      end: null,
    };
  }
  const { logger, clock, firmware } = parsed.data;
  if (logger !== serial)
    return {
      ok: false,
      field: 'logger',
      reason: `the token belongs to another logger than "${logger}"; give each logger its own`,
      again: false,
      end: { kind: 'forbidden', reason: 'the token belongs to another logger' },
    };
  const aheadS = clock - nowS;
  if (aheadS > CLOCK_AHEAD_MAX_S)
    return {
      ok: false,
      field: 'clock',
      reason: `is ${aheadS} s ahead of the server's clock; set the logger's clock and say hello again`,
      again: true,
      end: null,
    };
  return { ok: true, firmware };
}
