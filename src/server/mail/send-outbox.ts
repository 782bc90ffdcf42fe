import { createTransport, type Transporter } from 'nodemailer';
import { config } from '../config';
import { asIngest } from '../db/transaction';
import { log } from '../log';
import { markNotSent, markSent, takeDueMessage } from '../queries/outbox';

const MOST_A_RUN = 500;
const MOST_TRIES = 12;
const FIRST_WAIT_S = 60;
const LONGEST_WAIT_S = 6 * 3600;

/** A letter's own identifier, the same at every try. */
export const messageIdOf = (ref: string): string => `<${ref}@wakeline>`;

/** Seconds until the next try after `attempts` failed ones: doubling from a minute to six hours. */
export const waitAfter = (attempts: number): number =>
  Math.min(LONGEST_WAIT_S, FIRST_WAIT_S * 2 ** Math.max(0, attempts - 1));

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
        await transport.sendMail({
          from,
          to: { address: message.to.address, name: message.to.name },
          subject: message.subject,
          text: message.text,
          html: message.html,
          messageId: messageIdOf(message.ref),
          headers: { 'Auto-Submitted': 'auto-generated' },
        });
        await markSent(tx, message.id, now());
        return 'sent';
      } catch (error) {
        const attempts = message.attempts + 1;
        const final = refusedForGood(error) || attempts >= MOST_TRIES;
        await markNotSent(tx, message.id, {
          at: now(),
          error: error instanceof Error ? error.message : String(error),
          notBefore: final ? null : new Date(now().getTime() + waitAfter(attempts) * 1000),
        });
        return 'failed';
      }
    });
    if (outcome === 'none') break;
    count[outcome]++;
  }
  if (count.failed > 0) log.warn(count, 'the mail server did not take every letter');
  return count;
}
