import type { LettersPage } from '../../schemas/api/letters';
import { config } from '../config';
import type { Tx } from '../db/transaction';
import { lettersReceived } from '../mail/local-post';
import { withoutType } from '../mail/letter-type';
import { messageIdOf } from '../mail/send-outbox';
import { newestMessages } from '../queries/outbox';

/** The organisation's letters: waiting, sent, given up; in the demo also as the local post received them. */
export async function lettersPage(tx: Tx, at: Date): Promise<LettersPage> {
  const { SMTP_URL, LOCAL_MAIL_FOLDER } = config();
  const rows = await newestMessages(tx);
  const received = new Map(
    LOCAL_MAIL_FOLDER
      ? (await lettersReceived(LOCAL_MAIL_FOLDER, 500)).map((letter) => [letter.messageId, letter])
      : [],
  );
  return {
    at: at.toISOString(),
    sending: SMTP_URL !== undefined,
    localPost: LOCAL_MAIL_FOLDER !== undefined,
    letters: rows.map(({ createdAt, sentAt, givenUpAt, notBefore, ...row }) => {
      const letter = received.get(messageIdOf(row.ref));
      return {
        ...row,
        createdAt: createdAt.toISOString(),
        sentAt: sentAt?.toISOString() ?? null,
        givenUpAt: givenUpAt?.toISOString() ?? null,
        notBefore: notBefore.toISOString(),
        received: letter ? { at: letter.at, text: letter.text, html: withoutType(letter.html) } : null,
      };
    }),
  };
}
