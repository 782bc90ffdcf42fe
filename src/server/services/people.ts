import type { Actor } from '../../domain/access/permissions';
import type { Invite, InvitationItem, PeoplePage, PersonChange, PersonItem } from '../../schemas/api/people';
import { paths } from '../../schemas/paths';
import { newToken, tokenHash } from '../auth/secret-link';
import { publicUrl } from '../config';
import type { Tx } from '../db/transaction';
import { AppError, found } from '../errors';
import { letter } from '../mail/letter';
import {
  accountOf,
  accountsOf,
  addInvitation,
  endInvitation,
  endSessionsOf,
  invitationsOf,
  isAddressTaken,
  lockPeople,
  replaceSiteAccess,
  siteNumbers,
  updatePerson,
  type InvitationRow,
  type PersonAccount,
} from '../queries/accounts';
import { endTokens } from '../queries/api-tokens';
import { addMessage } from '../queries/outbox';
import { addAuditEntry, findPersonName } from '../queries/people';
import { siteChoices } from '../queries/site';
import { invitationWords } from '../../words/refusals-people';

/** An invitation can be used for so long. */
export const INVITATION_DAYS = 7;
const DAY_MS = 86_400_000;

const personItem = (p: PersonAccount, actor: Actor): PersonItem => ({
  id: p.ref,
  name: p.name,
  email: p.email,
  role: p.role,
  active: p.active,
  lastSeenAt: p.lastSeenAt?.toISOString() ?? null,
  deactivatedAt: p.deactivatedAt?.toISOString() ?? null,
  secondFactor: p.secondFactor,
  sites: p.sites,
  self: p.id === actor.personId,
  tokens: p.tokens,
  tokensUsedAt: p.tokensUsedAt?.toISOString() ?? null,
});

const stateOf = (i: InvitationRow, at: Date): InvitationItem['state'] =>
  i.acceptedAt ? 'accepted' : i.endedAt ? 'ended' : i.expiresAt <= at ? 'expired' : 'open';

/** Everybody of the organisation, invitations, and the sites that can be given. */
export async function peoplePage(tx: Tx, actor: Actor, at: Date): Promise<PeoplePage> {
  return {
    at: at.toISOString(),
    people: (await accountsOf(tx)).map((p) => personItem(p, actor)),
    invitations: (await invitationsOf(tx)).map((i) => ({
      id: i.ref,
      name: i.name,
      email: i.email,
      role: i.role,
      sites: i.sites,
      invitedBy: i.invitedBy,
      createdAt: i.createdAt.toISOString(),
      expiresAt: i.expiresAt.toISOString(),
      state: stateOf(i, at),
    })),
    sites: await siteChoices(tx),
  };
}

async function numbersOf(tx: Tx, sites: readonly string[]): Promise<number[]> {
  const known = await siteNumbers(tx, sites);
  const missing = sites.filter((ref) => !known.has(ref));
  if (missing.length > 0)
    throw new AppError('invalid', {
      message: invitationWords.siteNotYours,
      fields: [{ field: 'sites', message: invitationWords.oneNotYours }],
    });
  return [...known.values()];
}

/**
 * Writes an invitation and its letter in one transaction. A person who has an account already is told so; the
 * letter's link works once, for a week.
 * @throws AppError invalid · conflict
 */
export async function invite(
  tx: Tx,
  actor: Actor,
  body: Invite,
  at: Date,
  address: string | null,
): Promise<void> {
  if (body.role === 'customer' && body.sites.length === 0)
    throw new AppError('invalid', {
      message: invitationWords.chooseCustomerSites,
      fields: [{ field: 'sites', message: invitationWords.chooseSite }],
    });
  if (await isAddressTaken(body.email))
    throw new AppError('conflict', {
      message: invitationWords.signsInAlready(body.email),
      fields: [{ field: 'email', message: invitationWords.addressTaken }],
    });
  const sites = body.role === 'customer' ? await numbersOf(tx, body.sites) : [];
  const token = newToken();
  const ref = await addInvitation(tx, {
    organisationId: actor.organisationId,
    email: body.email,
    name: body.name,
    role: body.role,
    sites,
    hash: tokenHash(token),
    invitedBy: actor.personId,
    at,
    expiresAt: new Date(at.getTime() + INVITATION_DAYS * DAY_MS),
  });
  const from = (await findPersonName(tx, actor.personId)) ?? invitationWords.someManager;
  const { text, html } = letter({
    greeting: invitationWords.hello(body.name),
    paragraphs: [invitationWords.invites(from), invitationWords.linkWorksOnce(INVITATION_DAYS)],
    action: { words: invitationWords.accept, href: `${publicUrl()}${paths.invitation(token)}` },
    footer: invitationWords.notExpected,
  });
  await addMessage(tx, {
    organisationId: actor.organisationId,
    personId: null,
    siteId: null,
    kind: 'invitation',
    eventKey: `invitation:${ref}`,
    to: { address: body.email, name: body.name },
    subject: invitationWords.subject,
    text,
    html,
  });
  await addAuditEntry(tx, {
    organisationId: actor.organisationId,
    personId: actor.personId,
    address,
    action: 'people.invited',
    subject: `invitation ${ref}`,
    after: { email: body.email, name: body.name, role: body.role, sites: body.sites },
  });
}

/** @throws AppError conflict where it was used or ended before */
export async function withdrawInvitation(
  tx: Tx,
  actor: Actor,
  ref: string,
  at: Date,
  address: string | null,
): Promise<void> {
  if (!(await endInvitation(tx, ref, at)))
    throw new AppError('conflict', { message: invitationWords.usedBefore });
  await addAuditEntry(tx, {
    organisationId: actor.organisationId,
    personId: actor.personId,
    address,
    action: 'people.invitation_ended',
    subject: `invitation ${ref}`,
  });
}

/**
 * Changes somebody's name, role, sites, or whether they may sign in. Who is deactivated is signed out at once.
 * Nobody changes their own role or shuts themselves out, and one manager always stays.
 * @throws AppError not_found · forbidden · conflict
 */
export async function changePerson(
  tx: Tx,
  actor: Actor,
  ref: string,
  change: PersonChange,
  at: Date,
  address: string | null,
): Promise<PersonItem> {
  await lockPeople(tx);
  const before = found(await accountOf(tx, ref), 'person');
  const self = before.id === actor.personId;
  if (self && ((change.role !== undefined && change.role !== before.role) || change.active === false))
    throw new AppError('forbidden', {
      message: invitationWords.ownRole,
    });
  const role = change.role ?? before.role;
  const active = change.active ?? before.active;
  if (before.role === 'manager' && before.active && (role !== 'manager' || !active)) {
    const others = (await accountsOf(tx)).filter(
      (p) => p.role === 'manager' && p.active && p.id !== before.id,
    );
    if (others.length === 0)
      throw new AppError('conflict', {
        message: invitationWords.lastManager(before.name),
      });
  }
  await updatePerson(tx, before.id, change, at);
  if (role === 'customer' && change.sites !== undefined)
    await replaceSiteAccess(tx, before.id, await numbersOf(tx, change.sites));
  if (role !== 'customer') await replaceSiteAccess(tx, before.id, []);
  // what a session may do hangs on the role: a new one begins with the new role
  if (!active || role !== before.role) await endSessionsOf(tx, before.id);
  // whoever is let in again begins without the tokens of before
  if (!active) await endTokens(tx, before.id, { endedBy: actor.personId, at });
  const after = found(await accountOf(tx, ref), 'person');
  await addAuditEntry(tx, {
    organisationId: actor.organisationId,
    personId: actor.personId,
    address,
    action:
      active === before.active ? 'people.changed' : active ? 'people.reactivated' : 'people.deactivated',
    subject: `person ${ref}`,
    before: { name: before.name, role: before.role, active: before.active, sites: before.sites },
    after: { name: after.name, role: after.role, active: after.active, sites: after.sites },
  });
  return personItem(after, actor);
}
