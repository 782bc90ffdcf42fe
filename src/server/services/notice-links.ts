import { createHmac, timingSafeEqual } from 'node:crypto';
import type { NoticeKind } from '../../domain/notices/kinds';
import { paths } from '../../schemas/paths';
import { publicUrl } from '../config';
import type { TellEvent } from '../queries/notices-tell';
import type { Role } from '../../domain/access/permissions';
import type { Told } from '../../domain/notices/event';

/** Where a notice leads, and the way out of letters that works without signing in. */

const ref = (value: unknown): string => (typeof value === 'string' ? value : '');

/** The page that a notice leads to, as a path. */
export function hrefOf(told: Told, event: TellEvent, role: Role): string {
  const { site, detail } = event;
  if (role === 'customer') return paths.customer(site.ref);
  if (event.kind.startsWith('cause_')) return paths.cause(ref(detail.cause));
  if (event.kind.startsWith('case_')) return paths.caseFile(ref(detail.case));
  switch (event.kind) {
    case 'roll_call_stopped':
      return paths.rollCall(site.ref);
    case 'handover_made':
      return paths.handover(site.ref);
    case 'planned_work':
      return paths.plannedWorks(site.ref);
    default:
      return told.kind === 'hazard' ? paths.shutdown() : paths.site(site.ref);
  }
}

/** What a way out ends: letters of one kind, or every letter that gathers several. */
export type LetterOf = NoticeKind | 'gathered';

const mac = (key: Buffer, person: string, of: LetterOf): Buffer =>
  createHmac('sha256', key).update(`unsubscribe\n${person}\n${of}`).digest();

/** Names the person and what ends, signed with the person's own key: `PERSON.KIND.SIGNATURE`. */
export const unsubscribeToken = (person: { ref: string; key: Buffer }, of: LetterOf): string =>
  `${person.ref}.${of}.${mac(person.key, person.ref, of).toString('base64url')}`;

export const unsubscribeUrl = (person: { ref: string; key: Buffer }, of: LetterOf): string =>
  `${publicUrl()}${paths.unsubscribe(unsubscribeToken(person, of))}`;

const TOKEN = /^([0-9a-f-]{36})\.([a-z_]{3,20})\.([A-Za-z0-9_-]{43})$/;

/** The parts of a token, not yet proved; undefined for what is none. */
export function readToken(token: string): { person: string; of: string; signature: Buffer } | undefined {
  const [, person, of, signature] = TOKEN.exec(token) ?? [];
  if (!person || !of || !signature) return undefined;
  return { person, of, signature: Buffer.from(signature, 'base64url') };
}

export const isSigned = (token: { person: string; of: string; signature: Buffer }, key: Buffer): boolean =>
  timingSafeEqual(token.signature, mac(key, token.person, token.of as LetterOf));
