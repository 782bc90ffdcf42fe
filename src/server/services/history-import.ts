import { createHash } from 'node:crypto';
import { createReadStream } from 'node:fs';
import { open } from 'node:fs/promises';
import { pipeline } from 'node:stream/promises';
import type { Actor } from '../../domain/access/permissions';
import { layoutFault, type Subject } from '../../domain/history-import/layout';
import { HistoryReader } from '../../domain/history-import/read';
import {
  HISTORY_READINGS_MAX,
  HISTORY_ROWS_MAX,
  historyOrder,
  type HistoryImportView,
  type HistoryOrder,
  type HistoryPage,
  type HistoryStep,
} from '../../schemas/api/history-import';
import type { Tx } from '../db/transaction';
import { AppError, found } from '../errors';
import { rowsOf } from '../files/csv-rows';
import type { Spooled } from '../files/spool';
import { checked } from '../http/endpoint';
import {
  addReadings,
  addSeries,
  beginImport,
  finishImport,
  importOfContent,
  importsOfSite,
  ReadingColumns,
  subjectsOf,
  undoImport,
  type SeriesOf,
  type SubjectIds,
} from '../queries/history-import';
import { tellSiteChanged } from '../queries/live-notices';
import { addAuditEntry } from '../queries/people';
import { visibleSite } from '../queries/visible-site';
import { timeZones } from './time-zones';
import { historyImportRefusals } from '../../words/refusals-history';

export type OnHistoryStep = (step: HistoryStep, done: number, of: number) => Promise<void>;
interface How {
  at: Date;
  address: string | null;
}

/** What the page of the import knows before a file is there. @throws AppError not_found */
export async function historyPage(tx: Tx, siteRef: string, at: Date): Promise<HistoryPage> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  return {
    at: at.toISOString(),
    site: { id: site.ref, name: site.name, timeZone: site.timeZone },
    imports: await importsOfSite(tx, site.id),
    known: (await subjectsOf(tx, site.id)).known,
    timeZones: timeZones(),
  };
}

/** The first line of an upload is its order, as JSON. */
const ORDER_MAX_BYTES = 64 * 1024;
const READINGS_A_WRITE = 5000;

/** The order and where the file's own text begins. @throws AppError invalid */
export async function orderOf(path: string): Promise<{ order: HistoryOrder; start: number }> {
  const file = await open(path);
  try {
    const { buffer, bytesRead } = await file.read(Buffer.alloc(ORDER_MAX_BYTES), 0, ORDER_MAX_BYTES, 0);
    const end = buffer.subarray(0, bytesRead).indexOf(10);
    let value: unknown;
    try {
      value = JSON.parse(buffer.toString('utf8', 0, Math.max(0, end)));
    } catch {
      value = undefined; // told with the others, by its schema
    }
    return { order: checked(historyOrder, value, 'order'), start: end + 1 };
  } finally {
    await file.close();
  }
}

async function hashOf(path: string, start: number): Promise<Buffer> {
  const hash = createHash('sha256');
  await pipeline(createReadStream(path, { start }), hash);
  return hash.digest();
}

const again = (before: { fileName: string; madeAt: Date; ref: string }): AppError =>
  new AppError('conflict', {
    message: historyImportRefusals.importedAlready(before.fileName, before.madeAt.toISOString().slice(0, 10)),
    current: { import: before.ref },
  });

const idsOf = (subject: Subject, ids: SubjectIds): SeriesOf => {
  const none = { stringId: null, position: null, inputId: null, inverterId: null };
  if (subject.kind === 'inverter')
    return { ...none, inverterId: ids.inverters.get(subject.inverter) ?? null };
  if (subject.kind === 'input')
    return { ...none, inputId: ids.inputs.get(`${subject.inverter}/${subject.input}`) ?? null };
  return {
    ...none,
    stringId: ids.strings.get(subject.string) ?? null,
    position: subject.kind === 'unit' ? subject.position : null,
  };
};

/**
 * Keeps the readings of a file, all or nothing; cells that can't be read are left out, as many as the person has seen.
 * `tx` sees only what the actor may see. The file is read as a stream: its length costs time and no memory.
 *
 * @throws AppError not_found · invalid (layout, too many rows) · conflict (the same file again; read otherwise than seen)
 */
export async function importHistory(
  tx: Tx,
  actor: Actor,
  siteRef: string,
  file: Pick<Spooled, 'path' | 'bytes'>,
  { at, address }: How,
  onStep: OnHistoryStep,
): Promise<HistoryImportView> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  const { order, start } = await orderOf(file.path);
  const { layout } = order;
  const wrong = layoutFault(layout);
  if (wrong !== null)
    throw new AppError('invalid', {
      message: wrong,
      fields: [{ field: 'order.layout.columns', message: wrong }],
    });
  const hash = await hashOf(file.path, start);
  const before = await importOfContent(tx, site.id, hash);
  if (before) throw again(before);
  const ids = await subjectsOf(tx, site.id);
  const importId = await begun(tx, {
    siteId: site.id,
    fileName: order.fileName,
    hash,
    layout,
    note: order.note,
    personId: actor.personId,
    at,
  });

  const reader = new HistoryReader(layout, ids.known, Math.floor(at.getTime() / 1000));
  const series = new Map<string, number>();
  let waiting: { subject: Subject; key: string; at: number; values: (number | null)[] }[] = [];
  let added = 0;
  const write = async (): Promise<void> => {
    const columns = new ReadingColumns();
    for (const { subject, key, at: instant, values } of waiting) {
      let id = series.get(key);
      if (id === undefined)
        series.set(key, (id = await addSeries(tx, importId, site.id, idsOf(subject, ids))));
      columns.add(id, instant, values);
    }
    waiting = [];
    if (columns.length > 0) added += await addReadings(tx, columns);
  };
  for await (const { rows, bytes } of rowsOf(file.path, start, order.separator, layout.hasHeader)) {
    for (const { cells, line } of rows) {
      reader.row(cells, line, (subject, key, instant, values) =>
        waiting.push({ subject, key, at: instant, values }),
      );
      if (waiting.length >= READINGS_A_WRITE) await write();
    }
    checkSize(reader);
    await onStep('reading', bytes, file.bytes);
  }
  await write();
  checkSeen(reader, order.seen);
  await onStep('adding_up', file.bytes, file.bytes);
  await finishImport(tx, importId, site.timeZone, {
    rows: reader.rows,
    readings: added,
    leftOut: reader.leftOut,
    doubles: reader.doubles + reader.readings - added,
  });
  const made = (await importsOfSite(tx, site.id))[0];
  if (!made) throw new Error('an import was written and is not there');
  await addAuditEntry(tx, {
    organisationId: site.organisationId,
    personId: actor.personId,
    address,
    action: 'history.imported',
    subject: `import ${made.id}`,
    siteId: site.id,
    after: { of: made.fileName, rows: made.rows, readings: made.readings, from: made.from, to: made.to },
    reason: order.note,
  });
  await tellSiteChanged(tx, site.id);
  await onStep('kept', file.bytes, file.bytes);
  return made;
}

const UNIQUE_VIOLATION = '23505';
async function begun(tx: Tx, order: Parameters<typeof beginImport>[1]): Promise<number> {
  try {
    return await beginImport(tx, order);
  } catch (error) {
    // the same file was kept by somebody else at this moment
    if (error instanceof Error && 'code' in error && error.code === UNIQUE_VIOLATION)
      throw again({ fileName: order.fileName, madeAt: order.at, ref: '' });
    throw error;
  }
}

function checkSize({ rows, readings }: HistoryReader): void {
  const parts = historyImportRefusals.inParts;
  if (rows > HISTORY_ROWS_MAX)
    throw new AppError('too_large', { message: historyImportRefusals.tooManyRows(HISTORY_ROWS_MAX, parts) });
  if (readings > HISTORY_READINGS_MAX)
    throw new AppError('too_large', {
      message: historyImportRefusals.tooManyReadings(HISTORY_READINGS_MAX, parts),
    });
}

/** What is kept is what was looked at. */
function checkSeen(reader: HistoryReader, seen: HistoryOrder['seen']): void {
  const { rows, readings, leftOut } = reader;
  if (readings === 0)
    throw new AppError('invalid', {
      message: historyImportRefusals.noReading,
      fields: reader.faults.slice(0, 50).map((f) => ({
        field: `rows.${f.row}.${f.column}`,
        message: `${f.message}. ${f.remedy}`,
      })),
    });
  if (rows !== seen.rows || readings !== seen.readings || leftOut !== seen.leftOut)
    throw new AppError('conflict', {
      message: historyImportRefusals.readsOtherwise(
        readings,
        rows,
        leftOut,
        seen.readings,
        seen.rows,
        seen.leftOut,
      ),
    });
}

/**
 * Takes an import back: pages and figures are as they were before it.
 * @throws AppError not_found · conflict (taken back before)
 */
export async function takeImportBack(
  tx: Tx,
  actor: Actor,
  refs: { site: string; import: string },
  reason: string,
  { at, address }: How,
): Promise<HistoryImportView> {
  const site = found(await visibleSite(tx, refs.site), 'site');
  const { undone, fileName, readings } = found(
    await undoImport(tx, site.id, refs.import, actor.personId, at),
    'import',
  );
  if (undone)
    throw new AppError('conflict', {
      message: historyImportRefusals.takenBackAlready,
    });
  await addAuditEntry(tx, {
    organisationId: site.organisationId,
    personId: actor.personId,
    address,
    action: 'history.undone',
    subject: `import ${refs.import}`,
    siteId: site.id,
    after: { of: fileName, readings },
    reason,
  });
  await tellSiteChanged(tx, site.id);
  return found((await importsOfSite(tx, site.id, refs.import))[0], 'import');
}
