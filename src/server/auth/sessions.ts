import { createHash } from 'node:crypto';
import { NodePostgresAdapter } from '@lucia-auth/adapter-postgresql';
import { Lucia, TimeSpan, type Adapter, type DatabaseSession, type Session, type User } from 'lucia';
import type { Pool } from 'pg';
import type { Actor, Role } from '../../domain/access/permissions';
import { config } from '../config';
import { signInPool } from '../db/pools';
import { personOfSession } from '../queries/people';
import { describeSession } from '../queries/sessions';
import { initialsOf, type Theme, type Viewer } from './viewer';

interface PersonAttributes {
  active: boolean;
}
declare module 'lucia' {
  interface Register {
    Lucia: Lucia<Record<never, never>, { active: boolean }>;
    DatabaseUserAttributes: PersonAttributes;
    UserId: number;
  }
}

/** What the database knows a session by. */
export const sessionHash = (sessionId: string): string =>
  createHash('sha256').update(sessionId).digest('hex');

/** Keeps only a hash of each session's id: whoever reads the table cannot sign in with it. */
function hashingAdapter(pool: Pool): Adapter {
  const inner = new NodePostgresAdapter(pool, { user: 'person', session: 'session' });
  return {
    getSessionAndUser: async (id) => {
      const [session, user] = await inner.getSessionAndUser(sessionHash(id));
      return [session && { ...session, id }, user];
    },
    getUserSessions: (userId) => inner.getUserSessions(userId),
    setSession: (session: DatabaseSession) => inner.setSession({ ...session, id: sessionHash(session.id) }),
    updateSessionExpiration: (id, expiresAt) => inner.updateSessionExpiration(sessionHash(id), expiresAt),
    deleteSession: (id) => inner.deleteSession(sessionHash(id)),
    deleteUserSessions: (userId) => inner.deleteUserSessions(userId),
    deleteExpiredSessions: () => inner.deleteExpiredSessions(),
  };
}

/** "Keep me signed in" lasts 30 days of absence; without it the browser's session, 12 hours at most. */
function make(pool: Pool, kept: boolean) {
  return new Lucia(hashingAdapter(pool), {
    sessionExpiresIn: kept ? new TimeSpan(30, 'd') : new TimeSpan(12, 'h'),
    sessionCookie: {
      name: kept ? 'wakeline_kept' : 'wakeline_session',
      expires: kept,
      attributes: { secure: config().COOKIE_SECURE, sameSite: 'lax', path: '/' },
    },
    getUserAttributes: (person) => ({ active: person.active }),
  });
}
type Both = readonly [kept: Lucia, brief: Lucia];
const made = new WeakMap<Pool, Both>(); // pools are closed and made anew
function lucias(): Both {
  const pool = signInPool();
  const both: Both = made.get(pool) ?? [make(pool, true), make(pool, false)];
  made.set(pool, both);
  return both;
}

export interface SignedIn {
  actor: Actor;
  viewer: Viewer;
  sessionId: string;
  /** Cookies to send back: a session that was renewed, or blanks for one that has ended. */
  cookies: string[];
}

async function validated(lucia: Lucia, sessionId: string): Promise<{ session: Session; user: User } | null> {
  const { session, user } = await lucia.validateSession(sessionId);
  if (!session || !user.active) return null;
  return { session, user };
}

/** The cookies of ours that can be a session's. Whatever else a host's programs put beside them is not read. */
const ours = (cookieHeader: string): string =>
  cookieHeader
    .split(';')
    .map((cookie) => cookie.trim())
    .filter((cookie) => /^wakeline_(kept|session)=[a-z0-9]+$/.test(cookie))
    .join('; ');

/** Who a Cookie header stands for; null when nobody, or somebody who has been deactivated. */
export async function signedInBy(cookieHeader: string): Promise<SignedIn | { cookies: string[] }> {
  const blanks: string[] = [];
  for (const lucia of lucias()) {
    const sessionId = lucia.readSessionCookie(ours(cookieHeader));
    if (!sessionId) continue;
    const found = await validated(lucia, sessionId);
    const person = found && (await personOfSession(found.user.id, sessionHash(sessionId)));
    if (!found || !person) {
      blanks.push(lucia.createBlankSessionCookie().serialize());
      continue;
    }
    const renewed = found.session.fresh ? [lucia.createSessionCookie(sessionId).serialize()] : [];
    return {
      sessionId,
      cookies: [...blanks, ...renewed],
      actor: {
        personId: person.id,
        organisationId: person.organisationId,
        role: person.role as Role,
        sites: person.role === 'customer' ? person.sites : 'all',
      },
      viewer: {
        id: person.ref,
        name: person.name,
        initials: initialsOf(person.name),
        email: person.email,
        role: person.role as Role,
        organisationName: person.organisationName,
        timeZone: person.timeZone,
        units: person.units,
        theme: person.theme as Theme,
        unread: person.unread,
        hazards: person.hazards,
      },
    };
  }
  return { cookies: blanks };
}

/** The actor behind an upgrade request's Cookie header. */
export async function actorOfCookie(
  cookieHeader: string | undefined,
): Promise<{ actor: Actor; sessionId: string } | null> {
  const found = await signedInBy(cookieHeader ?? '');
  return 'actor' in found ? { actor: found.actor, sessionId: found.sessionId } : null;
}

/** A new session for a person, from where and with what; returns the cookie to set. */
export async function openSession(
  personId: number,
  kept: boolean,
  from: { address: string | null; agent: string | null } = { address: null, agent: null },
): Promise<string> {
  const lucia = lucias()[kept ? 0 : 1];
  const session = await lucia.createSession(personId, {});
  await describeSession(sessionHash(session.id), { ...from, kept });
  return lucia.createSessionCookie(session.id).serialize();
}

/** The name that a Set-Cookie line sets. */
export const cookieName = (line: string): string => line.split('=')[0] ?? '';

/**
 * What a browser is told when somebody signs in: their new session, and the end of whatever session it brought along.
 * A session of before, planted or left behind, would else be read in the place of the new one.
 */
export async function replacingCookies(before: string | null, cookie: string): Promise<string[]> {
  const blanks = await endSession(before);
  return [cookie, ...blanks.filter((line) => cookieName(line) !== cookieName(cookie))];
}

/** Ends a session and returns the blank cookies that clear it in the browser. */
export async function endSession(sessionId: string | null): Promise<string[]> {
  const [kept, brief] = lucias();
  if (sessionId) await kept.invalidateSession(sessionId);
  return [kept, brief].map((l) => l.createBlankSessionCookie().serialize());
}
