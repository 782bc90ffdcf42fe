import { randomUUID } from 'node:crypto';
import type { EventKind } from '../../src/domain/verdicts/codes';
import { tell } from '../../src/server/jobs/tell';
import type { TestDatabase } from './database';

/** Things that happen at sites of a test fleet, and what people were told of them. */
export const HERE = 'Weirside Clinic';
export const OTHER = 'Kestrel Row School';
export const FOREIGN = 'Netloft Terrace';
export const AT = new Date('2026-12-01T12:00:00Z');
export const after = (minutes: number): Date => new Date(AT.getTime() + minutes * 60_000);

export interface Happening {
  kind: EventKind;
  detail: Record<string, unknown>;
  at?: Date;
  recordedAt?: Date;
  site?: string;
}

export interface CauseDetail {
  cause: string;
  kind: string;
  headline: string;
  hazard: boolean;
  [more: string]: unknown;
}

export interface ToldNotice {
  email: string;
  kind: string;
  headline: string;
  came: number;
  over: boolean;
}
export interface WrittenLetter {
  to: string;
  kind: string;
  subject: string;
  html: string;
  text: string;
}

/** Tells everything that has happened. Transactions that still run hold it up for a moment. */
export async function tellAll(at = AT): Promise<void> {
  for (let tries = 0; tries < 1800; tries++) {
    if ((await tell(() => at)).held === 0) return;
    await new Promise((resolve) => setTimeout(resolve, 25));
  }
  throw new Error('a transaction that does not end holds up what is to be told');
}

export class Happenings {
  constructor(private readonly db: TestDatabase) {}

  async site(name: string): Promise<{ id: number; organisation: number }> {
    const { rows } = await this.db.owner.query<{ id: number; organisation: number }>(
      'select id, organisation_id as organisation from site where name = $1',
      [name],
    );
    const [row] = rows;
    if (!row) throw new Error(`there is no site "${name}"`);
    return row;
  }

  /** Begins anew: nothing has happened, nobody has chosen anything. */
  async forget(): Promise<void> {
    await this.db.owner.query(
      'truncate notice, notice_subject, notice_choice, message, event, cause, webhook, webhook_delivery cascade',
    );
  }

  async happens({ kind, detail, at = AT, recordedAt = at, site = HERE }: Happening): Promise<void> {
    const { id, organisation } = await this.site(site);
    await this.db.owner.query(
      `insert into event (at, recorded_at, organisation_id, site_id, kind, detail) values ($1, $2, $3, $4, $5, $6)`,
      [at, recordedAt, organisation, id, kind, detail],
    );
  }

  /** A cause that is open, of one unit. @returns the detail of its events */
  async cause(kind: string, headline: string, site = HERE): Promise<CauseDetail> {
    const { id } = await this.site(site);
    const { rows } = await this.db.owner.query<{ id: number; name: string; ref: string }>(
      'select id, name, ref from string where site_id = $1 order by id limit 1',
      [id],
    );
    const [string] = rows;
    const ref = randomUUID();
    const unit = { stringId: string?.ref, stringName: string?.name, position: 3, serial: 'X', since: AT };
    await this.db.owner.query(
      `insert into cause (ref, site_id, key, kind, hazard, headline, evidence, confidence, units, string_ids, since,
         opened_at, changed_at, loss_wh_day)
       values ($1, $2, $9, $3, $4, $5, 'Measured at the input.', 0.9, $6, $7, $8, $8, $8, 4200)`,
      [ref, id, kind, kind === 'not_shutting_down', headline, JSON.stringify([unit]), [string?.id], AT, ref],
    );
    return { cause: ref, kind, headline, hazard: kind === 'not_shutting_down' };
  }

  async setOpen(cause: string, open: boolean): Promise<void> {
    await this.db.owner.query('update cause set closed_at = $2 where ref = $1', [
      cause,
      open ? null : after(600),
    ]);
  }

  async notices(): Promise<ToldNotice[]> {
    const { rows } = await this.db.owner.query<ToldNotice>(
      `select p.email, n.kind, n.headline, n.came, n.over_at is not null as over
       from notice n join person p on p.id = n.person_id order by n.id`,
    );
    return rows;
  }

  async letters(): Promise<WrittenLetter[]> {
    const { rows } = await this.db.owner.query<WrittenLetter>(
      `select to_address as to, kind, subject, html_body as html, text_body as text from message order by id`,
    );
    return rows;
  }
}
