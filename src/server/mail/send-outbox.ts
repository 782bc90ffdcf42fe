import { createTransport, type SendMailOptions, type Transporter } from 'nodemailer';
import { config } from '../config';
import { asIngest } from '../db/transaction';
import { log } from '../log';
import { withType } from './letter-type';
import { markNotSent, markSent, takeDueMessage, type WaitingMessage } from '../queries/outbox';

const MOST_A_RUN = 500;
const MOST_TRIES = 12;
const FIRST_WAIT_S = 60;
const LONGEST_WAIT_S = 6 * 3600;

/** A letter's own identifier, the same at every try. */
export const messageIdOf = (ref: string): string => `<${ref}@wakeline>`;

/** Seconds until the next try after `attempts` failed ones: doubling from a minute to six hours. */
export const waitAfter = (attempts: number): number =>
  Math.min(LONGEST_WAIT_S, FIRST_WAIT_S * 2 ** Math.max(0, attempts - 1));

/** A header's text is one line: what a name brings along ends no header and begins none. */
export const oneLine = (text: string): string => text.replaceAll(/[\p{Cc}\u2028\u2029]+/gu, ' ').trim();

/** Where the drawing of a letter is found inside it. */
export const PICTURE_CID = 'drawing@wakeline';

/** The letter as nodemailer takes it. */
function mailOf(message: WaitingMessage, from: string): SendMailOptions {
  const { to, picture, unsubscribeUrl } = message;
  return {
    from,
    to: { address: to.address, name: oneLine(to.name) },
    subject: oneLine(message.subject),
    text: message.text,
    html: withType(message.html),
    messageId: messageIdOf(message.ref),
    attachments: picture
      ? [{ filename: 'drawing.png', content: picture, cid: PICTURE_CID, contentDisposition: 'inline' }]
      : [],
    headers: {
      'Auto-Submitted': 'auto-generated',
      ...(unsubscribeUrl && {
        'List-Unsubscribe': { prepared: true, value: `<${unsubscribeUrl}>` },
        'List-Unsubscribe-Post': 'List-Unsubscribe=One-Click',
      }),
    },
  };
}

/** The server will never take this one: a 5xx that is about this letter (RFC 5321, 4.2.1). */
const refusedForGood = (error: unknown): boolean => {
  const { responseCode, command } = error as { responseCode?: unknown; command?: unknown };
  return (
    typeof responseCode === 'number' &&
    responseCode >= 500 &&
    responseCode < 600 &&
    command !== 'CONN' &&
    !String(command).startsWith('AUTH')
  );
};

const THIS_SERVER = new Set(['ECONNECTION', 'ECONNREFUSED', 'ESOCKET', 'EDNS', 'ETIMEDOUT', 'ETLS', 'EAUTH']);

/** Not about this letter: the server is away, or lets nobody in. Every other letter would meet the same. */
const serverAway = (error: unknown): boolean => {
  const { code, command } = error as { code?: unknown; command?: unknown };
  return (
    command === 'CONN' ||
    String(command).startsWith('AUTH') ||
    (typeof code === 'string' && THIS_SERVER.has(code))
  );
};

/** The way out, as SMTP_URL says; undefined where a deployment sends no mail. */
export function mailTransport(url = config().SMTP_URL): Transporter | undefined {
  if (!url) return undefined;
  return createTransport({ url, connectionTimeout: 10_000, greetingTimeout: 10_000, socketTimeout: 30_000 });
}

/**
 * Sends what is due, each letter in a transaction of its own: marked only after the server took it. Its Message-ID
 * comes from the outbox, so that what a killed process sent without marking is the same letter when it comes again.
 * @returns how many were taken by the server, and how many were not
 */
export async function sendDue(
  now: () => Date,
  transport: Pick<Transporter, 'sendMail'> | undefined = mailTransport(),
  from = config().MAIL_FROM,
): Promise<{ sent: number; failed: number }> {
  const count = { sent: 0, failed: 0 };
  if (!transport) return count;
  for (let i = 0; i < MOST_A_RUN; i++) {
    const outcome = await asIngest(async (tx) => {
      const message = await takeDueMessage(tx, now());
      if (!message) return 'none';
      try {
        await transport.sendMail(mailOf(message, from));
        await markSent(tx, message.id, now());
        return 'sent';
      } catch (error) {
        const attempts = message.attempts + 1;
        const away = serverAway(error);
        const final = !away && (refusedForGood(error) || attempts >= MOST_TRIES);
        await markNotSent(tx, message.id, {
          at: now(),
          error: error instanceof Error ? error.message : String(error),
          notBefore: final
            ? null
            : new Date(now().getTime() + (away ? FIRST_WAIT_S : waitAfter(attempts)) * 1000),
        });
        return away ? 'away' : 'failed';
      }
    });
    if (outcome === 'none') break;
    count[outcome === 'away' ? 'failed' : outcome]++;
    // the others stay due and go out as soon as it is back; a letter is never given up for the server's sake
    if (outcome === 'away') break;
  }
  if (count.failed > 0) log.warn(count, 'the mail server did not take every letter');
  return count;
}
