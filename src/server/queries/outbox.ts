import type { Tx } from '../db/transaction';

/** The outbox: a letter is written with the change that it tells of, and sent by a job afterwards. */

export interface NewMessage {
  organisationId: number;
  personId: number | null;
  siteId: number | null;
  kind: string;
  /** Names what it tells of: one letter an address and event, never two. */
  eventKey: string;
  to: { address: string; name: string };
  subject: string;
  text: string;
  html: string;
  /** The drawing inside it: a row of letter_picture. */
  pictureId?: string | null;
  /** Ends letters of this kind with one click (RFC 8058). */
  unsubscribeUrl?: string | null;
}

/** @returns whether it is new: a second letter of one event to one address is none */
export async function addMessage(tx: Tx, message: NewMessage): Promise<boolean> {
  const added = await tx('message')
    .insert({
      organisation_id: message.organisationId,
      person_id: message.personId,
      site_id: message.siteId,
      kind: message.kind,
      event_key: message.eventKey,
      to_address: message.to.address,
      to_name: message.to.name,
      subject: message.subject,
      text_body: message.text,
      html_body: message.html,
      picture_id: message.pictureId ?? null,
      unsubscribe_url: message.unsubscribeUrl ?? null,
    })
    .onConflict(['event_key', 'to_address'])
    .ignore()
    .returning('id');
  return added.length > 0;
}

export interface WaitingMessage {
  id: string;
  ref: string;
  to: { address: string; name: string };
  subject: string;
  text: string;
  html: string;
  attempts: number;
  picture: Buffer | null;
  unsubscribeUrl: string | null;
}

/** Keeps a drawing for letters, once however many carry it. @returns its number */
export async function keepPicture(
  tx: Tx,
  organisationId: number,
  picture: { sha256: Buffer; png: Buffer },
): Promise<string> {
  await tx.raw(
    'insert into letter_picture (organisation_id, sha256, png) values (?, ?, ?) on conflict do nothing',
    [organisationId, picture.sha256, picture.png],
  );
  const { rows } = await tx.raw<{ rows: { id: string }[] }>(
    'select id from letter_picture where organisation_id = ? and sha256 = ?',
    [organisationId, picture.sha256],
  );
  return rows[0]!.id;
}

/** Drops drawings that no letter of the last weeks carries. */
export async function dropOldPictures(tx: Tx, before: Date): Promise<void> {
  await tx('letter_picture').where('created_at', '<', before).delete();
}

/** The oldest letter that is due, locked until the transaction ends; others pass it by. */
export async function takeDueMessage(tx: Tx, now: Date): Promise<WaitingMessage | undefined> {
  const { rows } = await tx.raw<{
    rows: (Omit<WaitingMessage, 'to'> & { address: string; name: string })[];
  }>(
    `select id, ref, to_address as address, to_name as name, subject, text_body as text, html_body as html, attempts,
       (select png from letter_picture where letter_picture.id = picture_id) as picture,
       unsubscribe_url as "unsubscribeUrl"
     from message where sent_at is null and given_up_at is null and not_before <= ?
     order by not_before, id limit 1 for update skip locked`,
    [now],
  );
  const row = rows[0];
  if (!row) return undefined;
  const { address, name, ...rest } = row;
  return { ...rest, to: { address, name } };
}

export async function markSent(tx: Tx, id: string, at: Date): Promise<void> {
  await tx('message')
    .where({ id })
    .update({ sent_at: at, attempts: tx.raw('attempts + 1'), last_error: null });
}

/** Not taken by the server: another try at `notBefore`, or none any more (`null`). */
export async function markNotSent(
  tx: Tx,
  id: string,
  outcome: { at: Date; error: string; notBefore: Date | null },
): Promise<void> {
  await tx('message')
    .where({ id })
    .update({
      attempts: tx.raw('least(attempts + 1, 32000)'),
      last_error: outcome.error.slice(0, 500),
      ...(outcome.notBefore ? { not_before: outcome.notBefore } : { given_up_at: outcome.at }),
    });
}

export interface OutboxRow {
  ref: string;
  kind: string;
  to: string;
  subject: string;
  createdAt: Date;
  sentAt: Date | null;
  givenUpAt: Date | null;
  notBefore: Date;
  attempts: number;
  lastError: string | null;
}

/** The newest letters of the actor's organisation. */
export async function newestMessages(tx: Tx, limit = 200): Promise<OutboxRow[]> {
  return tx('message')
    .select({
      ref: 'ref',
      kind: 'kind',
      to: 'to_address',
      subject: 'subject',
      createdAt: 'created_at',
      sentAt: 'sent_at',
      givenUpAt: 'given_up_at',
      notBefore: 'not_before',
      attempts: 'attempts',
      lastError: 'last_error',
    })
    .orderBy('created_at', 'desc')
    .limit(limit);
}
