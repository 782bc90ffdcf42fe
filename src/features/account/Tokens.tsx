import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Dialog } from '../../components/ui/Dialog';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { Tag } from '../../components/ui/Tag';
import { RelativeTime, SiteTime } from '../../components/ui/Time';
import { counted, listed } from '../../drawings/numbers';
import { api } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import { paths } from '../../schemas/paths';
import type { MadeToken, TokenItem, TokensPage } from '../../schemas/api/tokens';
import { useSending } from './send';
import { TokenForm } from './TokenForm';

const KEY = ['account', 'tokens'];

type Open = { kind: 'make' } | { kind: 'made'; made: MadeToken } | { kind: 'end'; token: TokenItem };

const titleOf = (open: Open): string =>
  ({ make: 'Make a token', made: 'Your new token', end: 'End this token?' })[open.kind];

/** Tokens by which programs of one's own read and write. */
export function Tokens({ initial, timeZone }: { initial: TokensPage; timeZone: string }) {
  const client = queryClient();
  const { data: page } = useQuery(
    {
      queryKey: KEY,
      queryFn: ({ signal }) => api<TokensPage>(paths.api.accountTokens(), { signal }),
      initialData: initial,
    },
    client,
  );
  const [open, setOpen] = useState<Open | null>(null);
  const [done, setDone] = useState('');
  const close = () => {
    setOpen(null);
    void client.invalidateQueries({ queryKey: KEY });
  };
  return (
    <Sheet
      id="tokens"
      title="Tokens"
      aside={
        <a href={paths.developers()} className="link">
          What a program can ask for
        </a>
      }
    >
      <div role="status" className="mb-3 empty:hidden">
        {done && <Notice kind="done" title={done} />}
      </div>
      {page.tokens.length === 0 ? (
        <p>
          None. A token lets a program of yours read from Wakeline, and never do more than you may yourself.
        </p>
      ) : (
        <ul className="divide-y divide-rule-faint">
          {page.tokens.map((t) => (
            <li key={t.id} className="flex flex-wrap items-center justify-between gap-x-4 gap-y-1 py-2.5">
              <TokenLine token={t} at={page.at} timeZone={timeZone} />
              <Button
                aria-label={`End the token ${t.name}`}
                onClick={() => {
                  setDone('');
                  setOpen({ kind: 'end', token: t });
                }}
              >
                End it
              </Button>
            </li>
          ))}
        </ul>
      )}
      <Button
        className="mt-3"
        onClick={() => {
          setDone('');
          setOpen({ kind: 'make' });
        }}
      >
        Make a token
      </Button>
      {/* one dialog whose content follows: one that closes would take the next one with it */}
      <Dialog open={open !== null} title={open ? titleOf(open) : ''} onClose={close}>
        {open?.kind === 'make' && (
          <TokenForm sites={page.sites} onMade={(made) => setOpen({ kind: 'made', made })} />
        )}
        {open?.kind === 'made' && <Made made={open.made} onKept={close} />}
        {open?.kind === 'end' && (
          <EndForm
            token={open.token}
            onLeft={close}
            onEnded={() => {
              setDone(`The token ${open.token.name} has ended.`);
              close();
            }}
          />
        )}
      </Dialog>
    </Sheet>
  );
}

function TokenLine({ token, at, timeZone }: { token: TokenItem; at: string; timeZone: string }) {
  return (
    <div className="min-w-0 flex-1 basis-[220px]">
      <p className="flex flex-wrap items-baseline gap-x-2 font-medium">
        <span className="[overflow-wrap:anywhere]">{token.name}</span>
        <span className="font-mono text-sm font-normal text-ink-2">…{token.ending}</span>
        {token.expired && <Tag tone="outline">ran out</Tag>}
      </p>
      <p className="text-sm text-ink-2">
        {token.scopes.join(', ')}; {token.sites === null ? 'every site' : sitesWords(token.sites)}
      </p>
      <p className="text-sm text-ink-2">
        {token.lastUsedAt ? (
          <>
            Used <RelativeTime at={token.lastUsedAt} now={at} timeZone={timeZone} />
            {token.lastAddress && ` from ${token.lastAddress}`}
          </>
        ) : (
          'Not used yet'
        )}
        . {token.expired ? 'Ran' : 'Runs'} out <SiteTime at={token.expiresAt} now={at} timeZone={timeZone} />.
      </p>
    </div>
  );
}

const FEW = 3;
const sitesWords = (sites: readonly string[]): string =>
  sites.length > FEW ? counted(sites.length, 'site') : listed(sites);

/** The token, this once. */
function Made({ made, onKept }: { made: MadeToken; onKept: () => void }) {
  const [copied, setCopied] = useState<boolean | null>(null);
  return (
    <>
      <p>
        Keep it where your program finds it and nobody else does. It is not shown again: Wakeline has only its
        hash.
      </p>
      <p
        className="my-3 select-all break-all border border-rule bg-film px-3 py-2.5 font-mono text-[15px]"
        aria-label="The token"
        role="textbox"
        aria-readonly="true"
        tabIndex={0}
      >
        {made.token}
      </p>
      <p role="status" className="mb-3 text-sm text-ink-2 empty:hidden">
        {copied === true && 'It is on your clipboard.'}
        {copied === false && 'Your browser did not allow it. Select the token and copy it.'}
      </p>
      <div className="flex flex-wrap gap-2">
        <Button
          onClick={() => {
            void navigator.clipboard.writeText(made.token).then(
              () => setCopied(true),
              () => setCopied(false),
            );
          }}
        >
          Copy it
        </Button>
        <Button weight="primary" onClick={onKept}>
          I have kept it
        </Button>
      </div>
    </>
  );
}

function EndForm({ token, onEnded, onLeft }: { token: TokenItem; onEnded: () => void; onLeft: () => void }) {
  const { busy, fault, send } = useSending();
  const end = async () => {
    const { taken } = await send(paths.api.accountToken(token.id), { method: 'DELETE' });
    if (taken) onEnded();
  };
  return (
    <>
      <p>
        The program that uses <strong className="font-semibold">{token.name}</strong> is refused from that
        moment. It can’t be undone; a new one can be made.
      </p>
      {fault && (
        <p role="alert" className="mt-3 font-medium text-rust-ink">
          {fault.message}
        </p>
      )}
      <div className="mt-4 flex gap-2">
        <Button weight="primary" disabled={busy} onClick={() => void end()}>
          End the token
        </Button>
        <Button onClick={onLeft}>Leave it</Button>
      </div>
    </>
  );
}
