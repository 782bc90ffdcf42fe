import { mayUse, type Actor } from '../../domain/access/permissions';
import type { CaseKind, CaseOrigin, CasePart } from '../../domain/cases/cases';
import type { Tx } from '../db/transaction';
import { AppError, found, type FieldFault } from '../errors';
import { caseByRef } from '../queries/cases';
import {
  addCaseEntry,
  addCaseEvent,
  causeForCase,
  insertCase,
  openCaseOfCause,
  staffOf,
  stringsByRef,
  type StaffPerson,
} from '../queries/cases-write';
import { tellSiteChanged } from '../queries/live-notices';
import { addAuditEntry, findPersonName } from '../queries/people';
import { visibleSite } from '../queries/visible-site';
import { gatherCaseFigures } from './case-figures';
import { openCaseRefusals } from '../../words/refusals-cases';

export interface CaseToOpen {
  /** Made where it was typed: the same one twice opens one case. */
  ref: string;
  /** Public identifier of the site. */
  site: string;
  origin: CaseOrigin;
  title: string;
  what: string;
  kind: CaseKind;
  /** Of a row of `cause`: one cause has one open case. */
  cause?: string | null;
  /** Strings that it is about, by public identifier; those of `parts` come with them. */
  strings: readonly string[];
  /** Units by string and position; null: somewhere in the string. */
  parts: readonly { string: string; position: number | null }[];
  assignee?: string | null;
  /** The site's local date. */
  dueOn?: string | null;
  /** Where the request came from, for the audit. */
  address: string | null;
}

export interface OpenedCase {
  id: string;
  number: number;
}

const wrong = (field: string, message: string): FieldFault => ({ field: `body.${field}`, message });

/** Who is named, among those who may be. @throws AppError invalid */
export function personAmong(people: readonly StaffPerson[], ref: string, field: string): StaffPerson {
  const person = people.find((p) => p.ref === ref);
  if (person) return person;
  const message = openCaseRefusals.personNotYours;
  throw new AppError('invalid', { message, fields: [wrong(field, message)] });
}

/** Units by string and position, with the names and serials of the as-built. @throws AppError invalid */
export async function partsOf(
  tx: Tx,
  siteId: number,
  call: Pick<CaseToOpen, 'strings' | 'parts'>,
): Promise<{ stringIds: number[]; stringRefs: string[]; parts: CasePart[] }> {
  const refs = [...new Set([...call.strings, ...call.parts.map((p) => p.string)])];
  const strings = await stringsByRef(tx, siteId, refs);
  if (strings.size < refs.length) {
    const message = openCaseRefusals.stringNotHere;
    throw new AppError('invalid', { message, fields: [wrong('strings', message)] });
  }
  const parts = call.parts.map(({ string, position }) => {
    const { name, slots } = found(strings.get(string), 'string');
    if (position !== null && !slots.has(position)) {
      const message = openCaseRefusals.noPosition(name, position);
      throw new AppError('invalid', { message, fields: [wrong('parts', message)] });
    }
    return {
      stringId: string,
      stringName: name,
      position,
      serial: position === null ? null : (slots.get(position) ?? null),
    };
  });
  return {
    stringIds: refs.flatMap((ref) => strings.get(ref)?.id ?? []).sort((a, b) => a - b),
    stringRefs: refs,
    parts,
  };
}

/**
 * Opens a case with the figures of this minute: the one way to do so, for staff and for a customer who reports
 * something. Number, history, event and audit are of one transaction.
 * @throws AppError not_found · forbidden · invalid (field and remedy) · conflict (the cause's case is open: `current`)
 */
export async function openCase(tx: Tx, actor: Actor, call: CaseToOpen, at: Date): Promise<OpenedCase> {
  if (!mayUse(actor.role, call.origin === 'customer' ? 'case.report' : 'case.write'))
    throw new AppError('forbidden', {
      message: openCaseRefusals.roleOpensNone(actor.role),
    });
  const site = found(await visibleSite(tx, call.site), 'site');
  const known = await caseByRef(tx, call.ref);
  if (known) {
    if (known.openedById === actor.personId && known.siteRef === site.ref)
      return { id: known.ref, number: known.number };
    throw new AppError('conflict', { message: openCaseRefusals.identifierTaken });
  }
  const cause = call.cause ? found(await causeForCase(tx, call.cause), 'cause') : null;
  if (cause && cause.siteId !== site.id)
    throw new AppError('invalid', {
      message: openCaseRefusals.causeElsewhere,
      fields: [wrong('cause', openCaseRefusals.causeElsewhere)],
    });
  const existing = cause && (await openCaseOfCause(tx, cause.id));
  if (existing)
    throw new AppError('conflict', {
      message: openCaseRefusals.openAlready(existing.number, existing.title),
      current: existing,
    });
  const assignee = call.assignee ? personAmong(await staffOf(tx), call.assignee, 'assignee') : null;
  const { stringIds, stringRefs, parts } = await partsOf(tx, site.id, call);
  const before = await gatherCaseFigures(tx, at, { siteId: site.id, stringRefs });
  const made = await insertCase(tx, {
    ref: call.ref,
    siteId: site.id,
    organisationId: site.organisationId,
    title: call.title,
    what: call.what,
    kind: call.kind,
    origin: call.origin,
    causeId: cause?.id ?? null,
    stringIds,
    parts,
    assigneeId: assignee?.id ?? null,
    dueOn: call.dueOn ?? null,
    openedBy: actor.personId,
    at,
    before,
  });
  if (!made) throw new AppError('conflict', { message: openCaseRefusals.identifierTaken });
  const person = (await findPersonName(tx, actor.personId)) ?? '';
  await addCaseEntry(tx, {
    caseId: made.id,
    siteId: site.id,
    at,
    personId: actor.personId,
    kind: 'opened',
    detail: {
      version: 1,
      title: call.title,
      origin: call.origin,
      assignee: assignee?.name ?? null,
      dueOn: call.dueOn ?? null,
    },
  });
  const detail = {
    case: call.ref,
    number: made.number,
    title: call.title,
    person,
    personId: actor.personId,
  };
  const event = { organisationId: site.organisationId, siteId: site.id, stringIds, at };
  await addCaseEvent(tx, {
    ...event,
    kind: 'case_opened',
    detail: { ...detail, origin: call.origin, ...(cause ? { cause: cause.ref } : {}) },
  });
  if (assignee && assignee.id !== actor.personId)
    await addCaseEvent(tx, {
      ...event,
      kind: 'case_assigned',
      detail: { ...detail, assignee: assignee.name, assigneeId: assignee.id },
    });
  await addAuditEntry(tx, {
    organisationId: actor.organisationId,
    personId: actor.personId,
    address: call.address,
    action: 'case.opened',
    subject: `case ${call.ref}`,
    siteId: site.id,
    after: {
      number: made.number,
      title: call.title,
      what: call.what,
      kind: call.kind,
      origin: call.origin,
      cause: cause?.ref ?? null,
      strings: stringRefs,
      assignee: assignee?.name ?? null,
      dueOn: call.dueOn ?? null,
    },
  });
  await tellSiteChanged(tx, site.id);
  return { id: call.ref, number: made.number };
}
