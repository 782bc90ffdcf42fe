import type { Actor } from '../../domain/access/permissions';
import { isClosed } from '../../domain/cases/cases';
import { CASE_KIND_WORDS, CASE_STATE_WORDS } from '../../words/domain-cases';
import { checklistItem } from '../../domain/cases/checklists';
import { partsInWords } from '../../drawings/case-figures';
import type { CaseChangeBody, CaseEntry, CasePage } from '../../schemas/api/cases';
import type { Tx } from '../db/transaction';
import { AppError, found } from '../errors';
import { entriesOf } from '../queries/cases';
import {
  addCaseEntry,
  addCaseEvent,
  lockCase,
  staffOf,
  stringNames,
  updateCase,
  type CaseChange,
  type CaseEventKind,
  type LockedCase,
} from '../queries/cases-write';
import { tellSiteChanged } from '../queries/live-notices';
import { addAuditEntry, findPersonName } from '../queries/people';
import { casePage } from './cases';
import { partsOf, personAmong } from './open-case';
import { changeCaseRefusals } from '../../words/refusals-cases';

type Facts = Extract<CaseChangeBody, { act: 'facts' }>;
type ToState = Extract<CaseChangeBody, { act: 'state' }>;
type Check = Extract<CaseChangeBody, { act: 'check' }>;

interface Changer {
  tx: Tx;
  actor: Actor;
  /** Name of who changes. */
  person: string;
  at: Date;
  address: string | null;
}

/**
 * Changes a case: its facts, its state, or one line of its checklist. Who saw an older version is told what changed
 * meanwhile and nothing is overwritten.
 * @throws AppError not_found · invalid · conflict (`current`: the case as it stands and what changed since)
 */
export async function changeCase(
  tx: Tx,
  actor: Actor,
  ref: string,
  body: CaseChangeBody,
  at: Date,
  address: string | null,
): Promise<CasePage> {
  const kept = found(await lockCase(tx, ref), 'case');
  const person = (await findPersonName(tx, actor.personId)) ?? '';
  const by: Changer = { tx, actor, person, at, address };
  if (body.act !== 'check' && body.version !== kept.version) throw await meanwhile(by, kept, body.version);
  if (body.act === 'facts') await changeFacts(by, kept, body);
  else if (body.act === 'state') await changeState(by, kept, body);
  else await checkLine(by, kept, body);
  await tellSiteChanged(tx, kept.siteId);
  return casePage(tx, actor, ref, at);
}

async function meanwhile({ tx, actor, at }: Changer, kept: LockedCase, seen: number): Promise<AppError> {
  const page = await casePage(tx, actor, kept.ref, at);
  const since = (await entriesOf(tx, kept.id)).filter(
    (e: CaseEntry) => typeof e.detail.version === 'number' && e.detail.version > seen,
  );
  const who = [...new Set(since.map((e) => e.person ?? 'Wakeline'))].join(' and ');
  return new AppError('conflict', {
    message: changeCaseRefusals.changedMeanwhile(who),
    current: { page, since },
  });
}

const tell = (
  { tx, actor, at, person }: Changer,
  kept: LockedCase,
  kind: CaseEventKind,
  detail: Record<string, unknown>,
) =>
  addCaseEvent(tx, {
    organisationId: kept.organisationId,
    siteId: kept.siteId,
    stringIds: kept.stringIds,
    at,
    kind,
    detail: {
      case: kept.ref,
      number: kept.number,
      title: kept.title,
      person,
      personId: actor.personId,
      ...detail,
    },
  });

const audit = (
  { tx, actor, address }: Changer,
  kept: LockedCase,
  action: string,
  before: unknown,
  after: unknown,
) =>
  addAuditEntry(tx, {
    organisationId: actor.organisationId,
    personId: actor.personId,
    address,
    action,
    subject: `case ${kept.ref}`,
    siteId: kept.siteId,
    before,
    after,
  });

interface Said {
  field: string;
  from: string;
  to: string;
}

async function changeFacts(by: Changer, kept: LockedCase, body: Facts): Promise<void> {
  const { tx, at, actor } = by;
  const said: Said[] = [];
  const change: CaseChange = {};
  const says = (field: string, from: string, to: string) => said.push({ field, from, to });
  if (body.title !== undefined && body.title !== kept.title) {
    change.title = body.title;
    says('title', kept.title, body.title);
  }
  if (body.what !== undefined && body.what !== kept.what) {
    change.what = body.what;
    says(changeCaseRefusals.whatIsWrong, kept.what, body.what);
  }
  if (body.kind !== undefined && body.kind !== kept.kind) {
    change.kind = body.kind;
    says('kind', CASE_KIND_WORDS[kept.kind], CASE_KIND_WORDS[body.kind]);
  }
  if (body.dueOn !== undefined && body.dueOn !== kept.dueOn) {
    change.dueOn = body.dueOn;
    says('due', kept.dueOn ?? changeCaseRefusals.noDay, body.dueOn ?? changeCaseRefusals.noDay);
  }
  let assigned: { id: number; name: string } | null = null;
  if (body.assignee !== undefined) {
    const staff = await staffOf(tx);
    const to = body.assignee === null ? null : personAmong(staff, body.assignee, 'assignee');
    if ((to?.id ?? null) !== kept.assigneeId) {
      change.assigneeId = to?.id ?? null;
      const from = kept.assigneeId === null ? 'nobody' : ((await findPersonName(tx, kept.assigneeId)) ?? '');
      says(changeCaseRefusals.assignedTo, from, to?.name ?? 'nobody');
      assigned = to;
    }
  }
  if (body.strings !== undefined || body.parts !== undefined) {
    const names = await stringNames(tx, kept.stringIds);
    const next = await partsOf(tx, kept.siteId, {
      strings: body.strings ?? [...names.keys()],
      parts: body.parts ?? kept.parts.map((p) => ({ string: p.stringId, position: p.position })),
    });
    change.stringIds = next.stringIds;
    change.parts = next.parts;
    const from = partsInWords(kept.parts, [...names.values()]);
    const to = partsInWords(change.parts, [...(await stringNames(tx, next.stringIds)).values()]);
    if (from !== to) says('parts', from || 'none', to || 'none');
  }
  if (said.length === 0) return;
  await updateCase(tx, kept.id, change, at);
  await addCaseEntry(tx, {
    caseId: kept.id,
    siteId: kept.siteId,
    at,
    personId: actor.personId,
    kind: 'change',
    detail: { version: kept.version + 1, changes: said },
  });
  const titled = { ...kept, title: change.title ?? kept.title };
  if (assigned && assigned.id !== actor.personId)
    await tell(by, titled, 'case_assigned', { assignee: assigned.name, assigneeId: assigned.id });
  await audit(
    by,
    kept,
    'case.changed',
    Object.fromEntries(said.map((s) => [s.field, s.from])),
    Object.fromEntries(said.map((s) => [s.field, s.to])),
  );
}

async function changeState(by: Changer, kept: LockedCase, body: ToState): Promise<void> {
  const { tx, at, actor } = by;
  if (body.state === kept.state) return;
  const closing = isClosed(body.state);
  if (closing && body.note.trim() === '') {
    const message = changeCaseRefusals.sayWhatWasDone;
    throw new AppError('invalid', { message, fields: [{ field: 'body.note', message }] });
  }
  const reopening = isClosed(kept.state) && !closing;
  await updateCase(
    tx,
    kept.id,
    {
      state: body.state,
      ...(closing ? { closed: { at, by: actor.personId } } : reopening ? { closed: null } : {}),
    },
    at,
  );
  await addCaseEntry(tx, {
    caseId: kept.id,
    siteId: kept.siteId,
    at,
    personId: actor.personId,
    kind: 'state',
    body: body.note,
    detail: { version: kept.version + 1, from: kept.state, to: body.state },
  });
  if (closing) await tell(by, kept, 'case_closed', { state: body.state, assigneeId: kept.assigneeId });
  else if (reopening)
    await tell(by, kept, 'case_reopened', {
      reason: body.note || changeCaseRefusals.openedAgain(by.person),
      assigneeId: kept.assigneeId,
    });
  await audit(
    by,
    kept,
    closing ? 'case.closed' : reopening ? 'case.reopened' : 'case.changed',
    { state: CASE_STATE_WORDS[kept.state] },
    { state: CASE_STATE_WORDS[body.state], ...(body.note ? { note: body.note } : {}) },
  );
}

async function checkLine(by: Changer, kept: LockedCase, body: Check): Promise<void> {
  const { tx, at, actor, person } = by;
  const item = found(checklistItem(body.key), changeCaseRefusals.checklistLine);
  const mark = kept.checklist.find((m) => m.key === body.key);
  if ((mark?.at ?? null) !== body.seen)
    throw new AppError('conflict', {
      message: changeCaseRefusals.lineChanged(mark?.by ?? '', mark?.done === true),
      current: { page: await casePage(tx, actor, kept.ref, at), since: [] },
    });
  const next = { key: body.key, done: body.done, by: person, at: at.toISOString(), note: body.note };
  await updateCase(
    tx,
    kept.id,
    { checklist: [...kept.checklist.filter((m) => m.key !== body.key), next] },
    at,
    false,
  );
  await addCaseEntry(tx, {
    caseId: kept.id,
    siteId: kept.siteId,
    at,
    personId: actor.personId,
    kind: 'checklist',
    body: body.note,
    detail: { key: body.key, check: item.check, done: body.done },
  });
  await audit(
    by,
    kept,
    'case.checked',
    mark ? { check: item.check, done: mark.done, note: mark.note } : null,
    { check: item.check, done: body.done, note: body.note },
  );
}
