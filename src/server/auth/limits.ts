import { RateLimiterPostgres, RateLimiterRes } from 'rate-limiter-flexible';
import { signInPool } from '../db/pools';
import { AppError } from '../errors';
import { limitWords } from '../../words/refusals';

const limiter = (keyPrefix: string, points: number, duration: number) =>
  new RateLimiterPostgres({
    storeClient: signInPool(),
    tableName: 'rate_limit',
    tableCreated: true,
    keyPrefix,
    points,
    duration,
    clearExpiredByTimeout: false,
  });

interface Limits {
  account: RateLimiterPostgres;
  address: RateLimiterPostgres;
}
let limits: Limits | undefined;
/** Wrong passwords: 10 for one account and 50 from one address in 15 minutes. */
const signInLimits = (): Limits =>
  (limits ??= { account: limiter('account', 10, 900), address: limiter('address', 50, 900) });

async function take(from: RateLimiterPostgres, key: string, what = limitWords.signIn): Promise<void> {
  try {
    await from.consume(key.slice(0, 200));
  } catch (blocked) {
    if (!(blocked instanceof RateLimiterRes)) throw blocked;
    const seconds = Math.max(1, Math.ceil(blocked.msBeforeNext / 1000));
    throw new AppError('too_many', {
      message: limitWords.tooMany(what, seconds),
      retryAfterS: seconds,
    });
  }
}

/** Counts a try; throws `too_many` with the wait when there were too many, whether the account exists or not. */
export async function takeSignInTry(email: string, address: string): Promise<void> {
  await take(signInLimits().address, address);
  await take(signInLimits().account, email.trim().toLowerCase());
}

/** A right password clears the account's count; the address's count stays. */
export async function forgiveAccount(email: string): Promise<void> {
  await signInLimits().account.delete(email.trim().toLowerCase());
}

let signing: RateLimiterPostgres | undefined;
/** Wrong passwords when signing: 10 of one person in 15 minutes. */
const signingLimit = (): RateLimiterPostgres => (signing ??= limiter('signing', 10, 900));

/** Counts a try to sign something with the password; throws `too_many` with the wait. */
export const takeSigningTry = (personId: number): Promise<void> =>
  take(signingLimit(), String(personId), limitWords.signWithPassword);

/** A right password clears the count. */
export async function forgiveSigner(personId: number): Promise<void> {
  await signingLimit().delete(String(personId));
}

interface LetterLimits {
  address: RateLimiterPostgres;
  account: RateLimiterPostgres;
  token: RateLimiterPostgres;
  code: RateLimiterPostgres;
}
let letters: LetterLimits | undefined;
/** Letters: 3 an hour to one address, 20 from one place. Links tried: 60 in 15 minutes. Codes: 8 of one person in 15 minutes. */
const letterLimits = (): LetterLimits =>
  (letters ??= {
    account: limiter('letter_account', 3, 3600),
    address: limiter('letter_address', 20, 3600),
    token: limiter('token', 60, 900),
    code: limiter('code', 8, 900),
  });

/** Counts a letter that somebody asked for; throws `too_many` with the wait, whether the account exists or not. */
export async function takeLetterTry(email: string, address: string): Promise<void> {
  await take(letterLimits().address, address, limitWords.askForLetter);
  await take(letterLimits().account, email.trim().toLowerCase(), limitWords.askForLetter);
}

/** Counts a link of a letter that somebody tries from an address. */
export const takeTokenTry = (address: string): Promise<void> =>
  take(letterLimits().token, address, limitWords.useLink);

let sharing: RateLimiterPostgres | undefined;
/** Reads of one shared page from one address: 600 in 15 minutes, some twenty screens behind one connection. */
export const takeSharedRead = (link: number, address: string): Promise<void> =>
  take((sharing ??= limiter('shared', 600, 900)), `${link} ${address}`, limitWords.readPage);

/** Counts a one-time code that somebody tries; a right one clears the count. */
export const takeCodeTry = (personId: number): Promise<void> =>
  take(letterLimits().code, String(personId), limitWords.useCode);
export async function forgiveCodes(personId: number): Promise<void> {
  await letterLimits().code.delete(String(personId));
}

let wrongTokens: RateLimiterPostgres | undefined;
/** Tokens that nobody knows: 30 from one address in 15 minutes. Whoever has a good one is not counted. */
const wrongTokenLimit = (): RateLimiterPostgres => (wrongTokens ??= limiter('wrong_token', 30, 900));

/** Counts a token that nobody knows; throws `too_many` with the wait. */
export const takeWrongToken = (address: string): Promise<void> =>
  take(wrongTokenLimit(), address, limitWords.useToken);

/** Requests of one token in a minute. */
export const API_LIMIT = { requests: 600, windowS: 60 } as const;
let requests: RateLimiterPostgres | undefined;

/** Counts a request of a token; says what is left and for how long. */
export async function takeApiRequest(
  tokenId: number,
): Promise<{ allowed: boolean; left: number; resetS: number }> {
  requests ??= limiter('api', API_LIMIT.requests, API_LIMIT.windowS);
  const said = await requests.consume(String(tokenId)).then(
    (counted) => ({ allowed: true, counted }),
    (blocked: unknown) => {
      if (!(blocked instanceof RateLimiterRes)) throw blocked;
      return { allowed: false, counted: blocked };
    },
  );
  return {
    allowed: said.allowed,
    left: Math.max(0, said.counted.remainingPoints),
    resetS: Math.max(1, Math.ceil(said.counted.msBeforeNext / 1000)),
  };
}
