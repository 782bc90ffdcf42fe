import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Sheet } from '../../components/ui/Sheet';
import { Tag } from '../../components/ui/Tag';
import { RelativeTime } from '../../components/ui/Time';
import { paths } from '../../schemas/paths';
import type { AccountPage } from '../../schemas/api/my-account';
import { useSending } from './send';
import { sessionsWords } from '../../words/account';

/** So many devices are seen at once, the newest first. */
const FEW = 8;

/** Where one is signed in, and the way out of each. */
export function Sessions({ page, onChanged }: { page: AccountPage; onChanged: () => void }) {
  const { busy, fault, send } = useSending();
  const [all, setAll] = useState(false);
  const others = page.sessions.filter((s) => !s.here);
  const end = async (key?: string) => {
    await send(paths.api.accountSessions(), { method: 'DELETE', body: key ? { key } : {} });
    onChanged();
  };
  return (
    <Sheet id="sessions" title={sessionsWords.whereYouAreSigned}>
      {fault && (
        <p role="alert" className="mb-2 font-medium text-rust-ink">
          {fault.message}
        </p>
      )}
      <ul className="divide-y divide-rule-faint">
        {(all ? page.sessions : page.sessions.slice(0, FEW)).map((s) => (
          <li key={s.key} className="flex flex-wrap items-center justify-between gap-x-4 gap-y-1 py-2.5">
            <div className="min-w-0">
              <p className="font-medium">{s.device}</p>
              <p className="text-sm text-ink-2">
                {sessionsWords.usedFrom(s.address)}
                <RelativeTime at={s.usedAt} now={page.at} timeZone={page.person.timeZone} />
              </p>
            </div>
            {s.here ? (
              <Tag tone="petrol">{sessionsWords.thisDevice}</Tag>
            ) : (
              <Button disabled={busy} onClick={() => void end(s.key)}>
                {sessionsWords.signItOut}
              </Button>
            )}
          </li>
        ))}
      </ul>
      <div className="mt-3 flex flex-wrap gap-2 empty:hidden">
        {others.length > 1 && (
          <Button disabled={busy} onClick={() => void end()}>
            {sessionsWords.signOutEverywhereElse}
          </Button>
        )}
        {!all && page.sessions.length > FEW && (
          <Button onClick={() => setAll(true)}>
            {sessionsWords.showMoreDevices(page.sessions.length, FEW)}
          </Button>
        )}
      </div>
    </Sheet>
  );
}
