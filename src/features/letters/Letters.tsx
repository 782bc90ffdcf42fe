import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { Tag } from '../../components/ui/Tag';
import { SiteTime } from '../../components/ui/Time';
import type { LetterItem, LettersPage } from '../../schemas/api/letters';
import { lettersWords } from '../../words/letters';

export function lettersFinding({ letters, sending, localPost }: LettersPage): {
  finding: string;
  sentence: string;
} {
  const waiting = letters.filter((l) => !l.sentAt && !l.givenUpAt).length;
  const lost = letters.filter((l) => l.givenUpAt).length;
  const where = localPost ? lettersWords.thisDemosLettersGo : lettersWords.aLetterIsMarked;
  if (!sending && waiting > 0)
    return {
      finding: lettersWords.noMailServer(waiting),
      sentence: lettersWords.setTheMailServer,
    };
  if (lost > 0)
    return {
      finding: lettersWords.givenUp(lost),
      sentence: lettersWords.theMailServerRefused,
    };
  if (waiting > 0) return { finding: lettersWords.toBeSent(waiting), sentence: where };
  return {
    finding: letters.length === 0 ? lettersWords.noLetterHasBeen : lettersWords.everyLetterHasBeen,
    sentence: where,
  };
}

function State({ letter }: { letter: LetterItem }) {
  if (letter.sentAt) return <Tag tone="petrol">{lettersWords.sent}</Tag>;
  if (letter.givenUpAt) return <Tag tone="rust">{lettersWords.givenUp2}</Tag>;
  return (
    <Tag tone="outline">
      {letter.attempts > 0 ? lettersWords.waitsAttempts(letter.attempts) : lettersWords.waits}
    </Tag>
  );
}

/** The outbox, letter by letter; what the local post received can be read. */
export function Letters({ page, timeZone }: { page: LettersPage; timeZone: string }) {
  if (page.letters.length === 0)
    return (
      <Notice kind="empty" title={lettersWords.nothingHasBeenWritten}>
        {lettersWords.aHandoverWritesTo}
      </Notice>
    );
  return (
    <Sheet id="letters" title={lettersWords.letters} aside={lettersWords.newestFirstAtMost}>
      <ul className="divide-y divide-rule-faint">
        {page.letters.map((letter) => (
          <li key={letter.ref} className="py-3">
            <div className="flex flex-wrap items-start justify-between gap-x-4 gap-y-1">
              <div className="min-w-0">
                <p className="font-semibold">{letter.subject}</p>
                <p className="break-all text-sm text-ink-2">
                  {lettersWords.toWritten(letter.to)}
                  <SiteTime at={letter.createdAt} now={page.at} timeZone={timeZone} zone />
                </p>
              </div>
              <State letter={letter} />
            </div>
            {letter.lastError && !letter.sentAt && (
              <p className="mt-1 text-sm text-rust-ink">
                {letter.lastError}
                {!letter.givenUpAt && (
                  <>
                    {lettersWords.nextTry}
                    <SiteTime at={letter.notBefore} now={page.at} timeZone={timeZone} />.
                  </>
                )}
              </p>
            )}
            {letter.received && (
              <details className="mt-1">
                <summary className="target cursor-pointer text-petrol">{lettersWords.readAsReceived}</summary>
                <iframe
                  title={lettersWords.letterSubject(letter.subject)}
                  sandbox=""
                  srcDoc={letter.received.html}
                  className="mt-2 h-[420px] w-full border border-rule bg-[#fff]"
                />
                <pre className="mt-2 overflow-x-auto whitespace-pre-wrap border border-rule-faint p-3 text-sm">
                  {letter.received.text}
                </pre>
              </details>
            )}
          </li>
        ))}
      </ul>
    </Sheet>
  );
}
