import { Button } from '../../components/ui/Button';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { Table } from '../../components/ui/Table';
import { Tag } from '../../components/ui/Tag';
import { SiteTime } from '../../components/ui/Time';
import { counted, number } from '../../drawings/numbers';
import type { LoggerTokenView, LoggerView } from '../../schemas/api/loggers';
import { stateWords } from './words';

interface Props {
  logger: LoggerView;
  now: Date;
  timeZone: string;
  mayManage: boolean;
  onNew: () => void;
  onEnd: (token: LoggerTokenView) => void;
}

/** One logger: whether it is there, its tokens, and what it sent that could not be taken. */
export function LoggerSheet({ logger, now, timeZone, mayManage, onNew, onEnd }: Props) {
  const at = (time: string | null) =>
    time ? <SiteTime at={time} now={now.toISOString()} timeZone={timeZone} zone /> : 'never';
  const alive = logger.tokens.filter((t) => stateWords(t, now).words !== 'ended');
  return (
    <Sheet
      id={`logger-${logger.serial}`}
      flush
      title={`Logger ${logger.serial}`}
      aside={
        <Tag tone={logger.connected ? 'petrol' : 'slate'} shape={logger.connected ? '●' : '▨'}>
          {logger.connected ? `connected by ${logger.byHttps ? 'HTTPS' : 'WebSocket'}` : 'not connected'}
        </Tag>
      }
    >
      <p className="mb-4 text-[15px]">
        Last spoke {at(logger.lastSpokeAt)}
        {logger.lastAddress && <> from {logger.lastAddress}</>}
        {logger.firmware && <>; firmware {logger.firmware}</>}.
      </p>
      <div className="mb-2 flex flex-wrap items-center justify-between gap-2">
        <h3 className="text-[15px]">Tokens</h3>
        {mayManage && (
          <Button onClick={onNew}>{alive.length === 0 ? 'Make a token' : 'Make a new token'}</Button>
        )}
      </div>
      <Table<LoggerTokenView>
        caption={`Tokens of logger ${logger.serial}`}
        rows={logger.tokens}
        rowKey={(t) => t.id}
        empty={<Notice kind="empty" title="It has no token, so that it is refused" />}
        columns={[
          {
            key: 'name',
            label: 'Token',
            cell: (t) => (
              <>
                <span className="font-medium">{t.name || 'without a name'}</span>
                <span className="block text-sm text-ink-2 md:hidden">last used {at(t.lastUsedAt)}</span>
              </>
            ),
          },
          {
            key: 'state',
            label: 'State',
            cell: (t) => {
              const { words, shape } = stateWords(t, now);
              return (
                <>
                  <Tag
                    tone={words === 'ended' ? 'plain' : words === 'in force' ? 'petrol' : 'outline'}
                    shape={shape}
                  >
                    {words}
                  </Tag>
                  {t.endsAt && (
                    <span className="block text-sm text-ink-2">
                      {at(t.endsAt)}
                      {t.endedBy && ` by ${t.endedBy}`}
                    </span>
                  )}
                </>
              );
            },
          },
          {
            key: 'made',
            label: 'Made',
            from: 'md',
            cell: (t) => (
              <>
                {at(t.madeAt)}
                {t.madeBy && <span className="block text-sm text-ink-2">{t.madeBy}</span>}
              </>
            ),
          },
          {
            key: 'used',
            label: 'Last used',
            from: 'md',
            cell: (t) => (
              <>
                {at(t.lastUsedAt)}
                {t.lastAddress && <span className="block text-sm text-ink-2">{t.lastAddress}</span>}
              </>
            ),
          },
          {
            key: 'end',
            label: 'End',
            numeric: true,
            cell: (t) =>
              mayManage &&
              stateWords(t, now).words !== 'ended' && (
                <button
                  type="button"
                  className="target px-1 text-petrol hover:underline"
                  aria-label={`End now: ${t.name ? `the token ${t.name}` : 'this token'}`}
                  onClick={() => onEnd(t)}
                >
                  End now
                </button>
              ),
          },
        ]}
      />
      <h3 className="mb-1 mt-6 text-[15px]">
        {logger.refused === 0
          ? 'Nothing of it was refused'
          : `${counted(logger.refused, 'message')} refused so far`}
      </h3>
      {logger.refusals.length > 0 && (
        <Table
          caption={`What was refused of logger ${logger.serial}`}
          rows={logger.refusals}
          rowKey={(r) => `${r.field} ${r.reason} ${r.firstAt}`}
          columns={[
            {
              key: 'what',
              label: 'What was wrong, the newest of its kind',
              cell: (r) => (
                <span className="break-words">
                  <code className="text-sm">{r.field}</code> {r.reason}
                </span>
              ),
            },
            { key: 'count', label: 'Times', numeric: true, cell: (r) => number(r.count) },
            { key: 'first', label: 'First', from: 'md', cell: (r) => at(r.firstAt) },
            { key: 'last', label: 'Last', cell: (r) => at(r.lastAt) },
          ]}
        />
      )}
      {logger.wrongTokens && (
        <p className="mt-3 text-[15px] text-ink-2">
          {counted(logger.wrongTokens.count, 'attempt')} with a token that nobody knows came from{' '}
          {logger.lastAddress}, the last one {at(logger.wrongTokens.lastAt)}. Other devices may share this
          address.
        </p>
      )}
    </Sheet>
  );
}
