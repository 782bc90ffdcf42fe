import { renderSVG } from 'uqr';
import type { Actor } from '../../domain/access/permissions';
import type { AccountPage, SecondFactorBegun } from '../../schemas/api/my-account';
import { paths } from '../../schemas/paths';
import { confirmPassword } from '../auth/confirm-password';
import { forgiveCodes, takeCodeTry, takeLetterTry } from '../auth/limits';
import { hashNewPassword } from '../auth/new-password';
import { newRecoveryCodes, newSecret, recoveryHash, secretAddress, stepOfCode } from '../auth/second-factor';
import { newToken, tokenHash } from '../auth/secret-link';
import { sessionHash } from '../auth/sessions';
import type { Viewer } from '../auth/viewer';
import { publicUrl } from '../config';
import type { Tx } from '../db/transaction';
import { AppError, found } from '../errors';
import { letter } from '../mail/letter';
import {
  addAccountLink,
  endAccountLinks,
  endSessionsOf,
  isAddressTaken,
  setPasswordHash,
} from '../queries/accounts';
import { addMessage } from '../queries/outbox';
import { addAuditEntry } from '../queries/people';
import { endSessionByKey, secondFactorOf, sessionsOf, setSecondFactor } from '../queries/sessions';
import { myAccountWords } from '../../words/refusals-people';

const EMAIL_HOURS = 24;
const HOUR_MS = 3_600_000;

/** Browser and system in a few words, from what a browser says of itself; nothing that only a guess could tell. */
export function deviceWords(agent: string | null): string {
  if (!agent) return myAccountWords.unknownDevice;
  const browser =
    [
      ['Edg/', 'Edge'],
      ['Firefox/', 'Firefox'],
      ['OPR/', 'Opera'],
      ['Chrome/', 'Chrome'],
      ['Safari/', 'Safari'],
    ].find(([mark]) => agent.includes(mark ?? ''))?.[1] ?? myAccountWords.someBrowser;
  const system =
    [
      ['Android', 'Android'],
      ['iPhone', 'iPhone'],
      ['iPad', 'iPad'],
      ['Windows', 'Windows'],
      ['Mac OS X', 'macOS'],
      ['Linux', 'Linux'],
    ].find(([mark]) => agent.includes(mark ?? ''))?.[1] ?? '';
  return system ? myAccountWords.browserOn(browser, system) : browser;
}

/** Sessions are named by a part of the hash that the table has: enough to end one, no way to become one. */
const keyOf = (hash: string): string => hash.slice(0, 24);

export async function accountPage(
  tx: Tx,
  actor: Actor,
  viewer: Viewer,
  sessionId: string | null,
  at: Date,
): Promise<AccountPage> {
  const factor = await secondFactorOf(tx, actor.personId);
  const here = sessionId ? sessionHash(sessionId) : '';
  return {
    at: at.toISOString(),
    person: {
      id: viewer.id,
      name: viewer.name,
      email: viewer.email,
      role: viewer.role,
      organisation: viewer.organisationName,
      timeZone: viewer.timeZone,
    },
    secondFactor: {
      since: factor?.confirmedAt?.toISOString() ?? null,
      recoveryCodesLeft: factor?.confirmedAt ? factor.recoveryCodes.length : 0,
    },
    sessions: (await sessionsOf(tx, actor.personId)).map((s) => ({
      key: keyOf(s.hash),
      here: s.hash === here,
      createdAt: s.createdAt.toISOString(),
      usedAt: s.usedAt.toISOString(),
      expiresAt: s.expiresAt.toISOString(),
      address: s.address,
      device: deviceWords(s.agent),
    })),
  };
}

export interface Caller {
  actor: Actor;
  viewer: Viewer;
  sessionId: string | null;
  address: string | null;
}
const audit = (tx: Tx, { actor, address }: Caller, action: string, after?: unknown): Promise<void> =>
  addAuditEntry(tx, {
    organisationId: actor.organisationId,
    personId: actor.personId,
    address,
    action,
    subject: 'own account',
    after,
  });

/**
 * A new password, with the current one; every other session ends.
 * @throws AppError invalid (fields `current`, `password`) · too_many
 */
export async function changePassword(
  tx: Tx,
  caller: Caller,
  { current, password }: { current: string; password: string },
): Promise<void> {
  await confirmed(caller, current);
  const hash = await hashNewPassword(password, caller.viewer);
  await setPasswordHash(tx, caller.actor.personId, hash);
  await endAccountLinks(tx, caller.actor.personId);
  await endSessionsOf(tx, caller.actor.personId, caller.sessionId ? sessionHash(caller.sessionId) : null);
  await audit(tx, caller, 'account.password_changed');
}

async function confirmed({ actor }: Caller, current: string): Promise<void> {
  try {
    await confirmPassword(actor.personId, current);
  } catch (error) {
    if (error instanceof AppError && error.kind === 'invalid')
      throw new AppError('invalid', {
        message: myAccountWords.wrongPassword,
        fields: [{ field: 'current', message: myAccountWords.wrongPasswordShort }],
      });
    throw error;
  }
}

/**
 * Writes a letter to the new address; the account takes it when the link in it is used.
 * @throws AppError invalid · too_many
 */
export async function askForEmail(
  tx: Tx,
  caller: Caller,
  { current, email }: { current: string; email: string },
  at: Date,
): Promise<void> {
  await confirmed(caller, current);
  await takeLetterTry(email, caller.address ?? '');
  // whether somebody else has it already is told to nobody: that letter is never written
  if (!(await isAddressTaken(email))) {
    const token = newToken();
    const hash = tokenHash(token);
    await addAccountLink(tx, {
      personId: caller.actor.personId,
      purpose: 'email_change',
      newEmail: email,
      hash,
      at,
      expiresAt: new Date(at.getTime() + EMAIL_HOURS * HOUR_MS),
    });
    const { text, html } = letter({
      greeting: myAccountWords.hello(caller.viewer.name),
      paragraphs: [myAccountWords.askedForAddress, myAccountWords.linkConfirms(EMAIL_HOURS)],
      action: { words: myAccountWords.useAddress, href: `${publicUrl()}${paths.confirmEmail(token)}` },
      footer: myAccountWords.leaveLetter,
    });
    await addMessage(tx, {
      organisationId: caller.actor.organisationId,
      personId: caller.actor.personId,
      siteId: null,
      kind: 'email_change',
      eventKey: `account_link:${hash.toString('hex')}`,
      to: { address: email, name: caller.viewer.name },
      subject: myAccountWords.newAddress,
      text,
      html,
    });
  }
  await audit(tx, caller, 'account.email_asked', { email });
}

/** Signs out one other device, or all others. */
export async function endOtherSessions(tx: Tx, caller: Caller, key: string | undefined): Promise<void> {
  const here = caller.sessionId ? sessionHash(caller.sessionId) : null;
  const ended = key
    ? await endSessionByKey(tx, caller.actor.personId, key)
    : await endSessionsOf(tx, caller.actor.personId, here);
  if (ended > 0) await audit(tx, caller, 'account.sessions_ended', { ended });
}

/** A new secret, not in force until a code of it was typed. @throws AppError invalid · conflict · too_many */
export async function beginSecondFactor(tx: Tx, caller: Caller, current: string): Promise<SecondFactorBegun> {
  await confirmed(caller, current);
  const factor = found(await secondFactorOf(tx, caller.actor.personId), 'person');
  if (factor.confirmedAt) throw new AppError('conflict', { message: myAccountWords.factorInForce });
  const secret = newSecret();
  await setSecondFactor(tx, caller.actor.personId, { secret, usedStep: null });
  return { secret, picture: renderSVG(secretAddress(secret, caller.viewer.email), { border: 2 }) };
}

/** Puts the secret in force with a code of it. @returns the recovery codes, shown this once */
export async function confirmSecondFactor(
  tx: Tx,
  caller: Caller,
  code: string,
  at: Date,
): Promise<{ recoveryCodes: string[] }> {
  await takeCodeTry(caller.actor.personId);
  const factor = found(await secondFactorOf(tx, caller.actor.personId), 'person');
  if (!factor.secret || factor.confirmedAt)
    throw new AppError('conflict', { message: myAccountWords.beginAgain });
  const step = stepOfCode(factor.secret, code, factor.usedStep, at);
  if (step === null)
    throw new AppError('invalid', {
      message: myAccountWords.codeWrongCheckClock,
      fields: [{ field: 'code', message: myAccountWords.codeWrong }],
    });
  const { shown, hashes } = newRecoveryCodes();
  await setSecondFactor(tx, caller.actor.personId, {
    confirmedAt: at,
    usedStep: step,
    recoveryCodes: hashes,
  });
  await forgiveCodes(caller.actor.personId);
  await audit(tx, caller, 'account.second_factor_begun');
  return { recoveryCodes: shown };
}

/** @throws AppError invalid · too_many */
export async function endSecondFactor(tx: Tx, caller: Caller, current: string): Promise<void> {
  await confirmed(caller, current);
  await setSecondFactor(tx, caller.actor.personId, {
    secret: null,
    confirmedAt: null,
    usedStep: null,
    recoveryCodes: [],
  });
  await audit(tx, caller, 'account.second_factor_ended');
}

/**
 * The second thing at sign-in: a code of the authenticator, or a recovery code, which is spent.
 * @throws AppError unauthenticated (field `code`) · too_many
 */
export async function takeSecondFactor(tx: Tx, personId: number, code: string, at: Date): Promise<void> {
  await takeCodeTry(personId);
  const factor = await secondFactorOf(tx, personId);
  const step = factor?.secret ? stepOfCode(factor.secret, code, factor.usedStep, at) : null;
  if (step !== null) await setSecondFactor(tx, personId, { usedStep: step });
  else {
    const spent = recoveryHash(code);
    if (!factor?.recoveryCodes.includes(spent))
      throw new AppError('unauthenticated', {
        message: myAccountWords.codeWrongOrRecovery,
        fields: [{ field: 'code', message: myAccountWords.codeWrong }],
      });
    await setSecondFactor(tx, personId, { recoveryCodes: factor.recoveryCodes.filter((h) => h !== spent) });
  }
  await forgiveCodes(personId);
}
