import { paths } from '../../schemas/paths';
import { takeLetterTry, takeTokenTry } from '../auth/limits';
import { hashNewPassword } from '../auth/new-password';
import { newToken, TOKEN_PATTERN, tokenHash } from '../auth/secret-link';
import { openSession } from '../auth/sessions';
import { publicUrl } from '../config';
import { actFor, asSignIn } from '../db/transaction';
import { AppError } from '../errors';
import { letter } from '../mail/letter';
import {
  accountLinkByToken,
  acceptInvitation,
  addAccountLink,
  endAccountLinks,
  endSessionsOf,
  invitationByToken,
  setEmail,
  setPasswordHash,
  useAccountLink,
  type AccountLinkRow,
  type InvitationRow,
} from '../queries/accounts';
import { addMessage } from '../queries/outbox';
import { addAuditEntry, credentialsOf } from '../queries/people';
import { accountLetters } from '../../words/letters-sent';

/** What a link in a letter lets somebody do without being signed in. */

export const RESET_HOURS = 2;
const HOUR_MS = 3_600_000;

const gone = (what: string) =>
  new AppError('not_found', {
    message: accountLetters.thisCantBeUsed(what),
  });

/** An invitation that can be used. @throws AppError not_found · too_many */
export async function openInvitation(token: string, at: Date, address: string): Promise<InvitationRow> {
  await takeTokenTry(address);
  if (!TOKEN_PATTERN.test(token)) throw gone('invitation');
  const invitation = await asSignIn((tx) => invitationByToken(tx, tokenHash(token)));
  if (!invitation || invitation.acceptedAt || invitation.endedAt || invitation.expiresAt <= at)
    throw gone('invitation');
  return invitation;
}

/**
 * Makes the account of somebody who was invited, once, and signs them in.
 * @returns the session's cookie and the role
 * @throws AppError not_found · invalid (field `password`) · too_many
 */
export async function useInvitation(
  token: string,
  given: { name: string; password: string },
  from: { address: string; agent: string | null },
  at: Date,
): Promise<{ cookie: string; role: string }> {
  const { email } = await openInvitation(token, at, from.address);
  const passwordHash = await hashNewPassword(given.password, { email, name: given.name });
  const person = await asSignIn(async (tx) => {
    const invitation = await invitationByToken(tx, tokenHash(token), true);
    if (!invitation || invitation.acceptedAt || invitation.endedAt) throw gone('invitation');
    await actFor(tx, invitation.organisationId);
    const id = await acceptInvitation(tx, invitation, { name: given.name, passwordHash }, at);
    await addAuditEntry(tx, {
      organisationId: invitation.organisationId,
      personId: id,
      address: from.address,
      action: 'people.joined',
      subject: `invitation ${invitation.ref}`,
      after: { role: invitation.role },
    });
    return { id, role: invitation.role };
  });
  return { cookie: await openSession(person.id, false, from), role: person.role };
}

/**
 * Writes a letter with a link that sets a new password, where somebody has this address; the answer is the same
 * where nobody has.
 * @throws AppError too_many
 */
export async function askForPassword(email: string, address: string, at: Date): Promise<void> {
  await takeLetterTry(email, address);
  const person = await credentialsOf(email);
  if (!person) return;
  const token = newToken();
  await asSignIn(async (tx) => {
    const hash = tokenHash(token);
    await actFor(tx, person.organisationId);
    await addAccountLink(tx, {
      personId: person.id,
      purpose: 'password_reset',
      hash,
      at,
      expiresAt: new Date(at.getTime() + RESET_HOURS * HOUR_MS),
    });
    const { text, html } = letter({
      greeting: accountLetters.helloPerson(person.name),
      paragraphs: [accountLetters.askedForPassword, accountLetters.theLinkBelowWorks(RESET_HOURS)],
      action: { words: accountLetters.setANewPassword, href: `${publicUrl()}${paths.newPassword(token)}` },
      footer: accountLetters.notYou,
    });
    await addMessage(tx, {
      organisationId: person.organisationId,
      personId: person.id,
      siteId: null,
      kind: 'password_reset',
      eventKey: `account_link:${hash.toString('hex')}`,
      to: { address: person.email, name: person.name },
      subject: accountLetters.newPasswordSubject,
      text,
      html,
    });
  });
}

const usable = (
  link: AccountLinkRow | undefined,
  purpose: AccountLinkRow['purpose'],
  at: Date,
): link is AccountLinkRow =>
  link !== undefined && link.purpose === purpose && link.usedAt === null && link.expiresAt > at;

/** Whose password a link sets. @throws AppError not_found · too_many */
export async function openPasswordLink(token: string, at: Date, address: string): Promise<AccountLinkRow> {
  await takeTokenTry(address);
  if (!TOKEN_PATTERN.test(token)) throw gone('link');
  const link = await asSignIn((tx) => accountLinkByToken(tx, tokenHash(token)));
  if (!usable(link, 'password_reset', at)) throw gone('link');
  return link;
}

/**
 * Sets a new password by a letter's link; every session ends.
 * @throws AppError not_found · invalid (field `password`) · too_many
 */
export async function setPasswordByLink(
  token: string,
  password: string,
  address: string,
  at: Date,
): Promise<void> {
  const { email, name } = await openPasswordLink(token, at, address);
  const hash = await hashNewPassword(password, { email, name });
  await asSignIn(async (tx) => {
    const link = await accountLinkByToken(tx, tokenHash(token));
    if (!usable(link, 'password_reset', at)) throw gone('link');
    await actFor(tx, link.organisationId);
    await useAccountLink(tx, link.id, at);
    await setPasswordHash(tx, link.personId, hash);
    await endAccountLinks(tx, link.personId);
    await endSessionsOf(tx, link.personId);
    await addAuditEntry(tx, {
      organisationId: link.organisationId,
      personId: link.personId,
      address,
      action: 'account.password_reset',
      subject: 'own account',
    });
  });
}

/**
 * Makes the new address that somebody asked for their own, from the letter that was sent to it.
 * @throws AppError not_found · conflict · too_many
 */
export async function confirmEmail(token: string, address: string, at: Date): Promise<string> {
  await takeTokenTry(address);
  if (!TOKEN_PATTERN.test(token)) throw gone('link');
  return asSignIn(async (tx) => {
    const link = await accountLinkByToken(tx, tokenHash(token));
    if (!usable(link, 'email_change', at) || !link.newEmail) throw gone('link');
    await actFor(tx, link.organisationId);
    await useAccountLink(tx, link.id, at);
    await setEmail(tx, link.personId, link.newEmail);
    await endAccountLinks(tx, link.personId); // one that went to the address before
    await addAuditEntry(tx, {
      organisationId: link.organisationId,
      personId: link.personId,
      address,
      action: 'account.email_changed',
      subject: 'own account',
      before: { email: link.email },
      after: { email: link.newEmail },
    });
    return link.newEmail;
  });
}
