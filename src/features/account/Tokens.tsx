import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Dialog } from '../../components/ui/Dialog';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { Tag } from '../../components/ui/Tag';
import { RelativeTime, SiteTime } from '../../components/ui/Time';
import { listed } from '../../drawings/numbers';
import { api } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import { paths } from '../../schemas/paths';
import type { MadeToken, TokenItem, TokensPage } from '../../schemas/api/tokens';
import { useSending } from './send';
import { TokenForm } from './TokenForm';
import { tokensWords } from '../../words/account';

const KEY = ['account', 'tokens'];

type Open = { kind: 'make' } | { kind: 'made'; made: MadeToken } | { kind: 'end'; token: TokenItem };

const titleOf = (open: Open): string =>
  ({ make: tokensWords.makeToken, made: tokensWords.yourNewToken, end: tokensWords.endThisToken })[open.kind];

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
      title={tokensWords.tokens}
      aside={
        <a href={paths.developers()} className="link">
          {tokensWords.programsInterface}
        </a>
      }
    >
      <div role="status" className="mb-3 empty:hidden">
        {done && <Notice kind="done" title={done} />}
      </div>
      {page.tokens.length === 0 ? (
        <p>{tokensWords.noneATokenLets}</p>
      ) : (
        <ul className="divide-y divide-rule-faint">
          {page.tokens.map((t) => (
            <li key={t.id} className="flex flex-wrap items-center justify-between gap-x-4 gap-y-1 py-2.5">
              <TokenLine token={t} at={page.at} timeZone={timeZone} />
              <Button
                aria-label={tokensWords.endTheToken(t.name)}
                onClick={() => {
                  setDone('');
                  setOpen({ kind: 'end', token: t });
                }}
              >
                {tokensWords.endIt}
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
        {tokensWords.makeToken}
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
              setDone(tokensWords.theTokenHasEnded(open.token.name));
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
        {token.expired && <Tag tone="outline">{tokensWords.ranOut}</Tag>}
      </p>
      <p className="text-sm text-ink-2">
        {token.scopes.join(', ')}; {token.sites === null ? tokensWords.everySite : sitesWords(token.sites)}
      </p>
      <p className="text-sm text-ink-2">
        {token.lastUsedAt ? (
          <>
            {tokensWords.used}
            <RelativeTime at={token.lastUsedAt} now={at} timeZone={timeZone} />
            {token.lastAddress && tokensWords.fromLastAddress(token.lastAddress)}
          </>
        ) : (
          tokensWords.notUsedYet
        )}
        {tokensWords.expiredOut(token.expired)}
        <SiteTime at={token.expiresAt} now={at} timeZone={timeZone} />.
      </p>
    </div>
  );
}

const FEW = 3;
const sitesWords = (sites: readonly string[]): string =>
  sites.length > FEW ? tokensWords.sitesCount(sites.length) : listed(sites);

/** The token, this once. */
function Made({ made, onKept }: { made: MadeToken; onKept: () => void }) {
  const [copied, setCopied] = useState<boolean | null>(null);
  return (
    <>
      <p>{tokensWords.keepItWhereYour}</p>
      <p
        className="my-3 select-all break-all border border-rule bg-film px-3 py-2.5 font-mono text-[15px]"
        aria-label={tokensWords.theToken}
        role="textbox"
        aria-readonly="true"
        tabIndex={0}
      >
        {made.token}
      </p>
      <p role="status" className="mb-3 text-sm text-ink-2 empty:hidden">
        {copied === true && tokensWords.copied}
        {copied === false && tokensWords.copyRefused}
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
          {tokensWords.copyIt}
        </Button>
        <Button weight="primary" onClick={onKept}>
          {tokensWords.keptIt}
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
        {tokensWords.theProgramThatUses}
        <strong className="font-semibold">{token.name}</strong>
        {tokensWords.endMeans}
      </p>
      {fault && (
        <p role="alert" className="mt-3 font-medium text-rust-ink">
          {fault.message}
        </p>
      )}
      <div className="mt-4 flex gap-2">
        <Button weight="primary" disabled={busy} onClick={() => void end()}>
          {tokensWords.endTokenTitle}
        </Button>
        <Button onClick={onLeft}>{tokensWords.leaveIt}</Button>
      </div>
    </>
  );
}
