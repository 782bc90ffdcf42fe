import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { Tag } from '../../components/ui/Tag';
import { SiteTime } from '../../components/ui/Time';
import { counted } from '../../drawings/numbers';
import type { LetterItem, LettersPage } from '../../schemas/api/letters';

export function lettersFinding({ letters, sending, localPost }: LettersPage): {
  finding: string;
  sentence: string;
} {
  const waiting = letters.filter((l) => !l.sentAt && !l.givenUpAt).length;
  const lost = letters.filter((l) => l.givenUpAt).length;
  const where = localPost
    ? 'This demo’s letters go to a post on this machine and no further.'
    : 'A letter is marked as sent only after the mail server took it.';
  if (!sending && waiting > 0)
    return {
      finding: `${counted(waiting, 'letter waits', 'letters wait')}: no mail server is set`,
      sentence: 'Set SMTP_URL; what waits goes out by itself.',
    };
  if (lost > 0)
    return {
      finding: `${counted(lost, 'letter was', 'letters were')} given up`,
      sentence: 'The mail server refused it for good, or twelve tries failed: see why below.',
    };
  if (waiting > 0)
    return { finding: `${counted(waiting, 'letter waits', 'letters wait')} to be sent`, sentence: where };
  return {
    finding: letters.length === 0 ? 'No letter has been written' : 'Every letter has been sent',
    sentence: where,
  };
}

function State({ letter }: { letter: LetterItem }) {
  if (letter.sentAt) return <Tag tone="petrol">sent</Tag>;
  if (letter.givenUpAt) return <Tag tone="rust">given up</Tag>;
  return (
    <Tag tone="outline">
      {letter.attempts > 0 ? `waits, ${counted(letter.attempts, 'try', 'tries')}` : 'waits'}
    </Tag>
  );
}

/** The outbox, letter by letter; what the local post received can be read. */
export function Letters({ page, timeZone }: { page: LettersPage; timeZone: string }) {
  if (page.letters.length === 0)
    return (
      <Notice kind="empty" title="Nothing has been written yet">
        A handover writes to the customers of its site.
      </Notice>
    );
  return (
    <Sheet id="letters" title="Letters" aside="newest first, at most 200">
      <ul className="divide-y divide-rule-faint">
        {page.letters.map((letter) => (
          <li key={letter.ref} className="py-3">
            <div className="flex flex-wrap items-start justify-between gap-x-4 gap-y-1">
              <div className="min-w-0">
                <p className="font-semibold">{letter.subject}</p>
                <p className="break-all text-sm text-ink-2">
                  to {letter.to}, written{' '}
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
                    {' '}
                    Next try <SiteTime at={letter.notBefore} now={page.at} timeZone={timeZone} />.
                  </>
                )}
              </p>
            )}
            {letter.received && (
              <details className="mt-1">
                <summary className="target cursor-pointer text-petrol">Read it as it was received</summary>
                <iframe
                  title={`Letter: ${letter.subject}`}
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
