import { Button } from '../../components/ui/Button';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { Table } from '../../components/ui/Table';
import { Tag } from '../../components/ui/Tag';
import { SiteTime } from '../../components/ui/Time';
import { number } from '../../drawings/numbers';
import type { LoggerTokenView, LoggerView } from '../../schemas/api/loggers';
import { stateWords } from '../../words/loggers-sentences';
import { loggerSheet } from '../../words/loggers';

interface Props {
  logger: LoggerView;
  now: Date;
  timeZone: string;
  mayManage: boolean;
  onNew: () => void;
  onEnd: (token: LoggerTokenView) => void;
}

const TONE = { in_force: 'petrol', ending: 'outline', ended: 'plain' } as const;

/** One logger: whether it is there, its tokens, and what it sent that could not be taken. */
export function LoggerSheet({ logger, now, timeZone, mayManage, onNew, onEnd }: Props) {
  const at = (time: string | null) =>
    time ? <SiteTime at={time} now={now.toISOString()} timeZone={timeZone} zone /> : loggerSheet.never;
  const alive = logger.tokens.filter((t) => stateWords(t, now).state !== 'ended');
  return (
    <Sheet
      id={`logger-${logger.serial}`}
      flush
      title={loggerSheet.loggerSerial(logger.serial)}
      aside={
        <Tag tone={logger.connected ? 'petrol' : 'slate'} shape={logger.connected ? '●' : '▨'}>
          {logger.connected ? loggerSheet.connectedBy(logger.byHttps) : loggerSheet.notConnected}
        </Tag>
      }
    >
      <p className="mb-4 text-[15px]">
        {loggerSheet.lastSpoke}
        {at(logger.lastSpokeAt)}
        {logger.lastAddress && <>{loggerSheet.fromLastAddress(logger.lastAddress)}</>}
        {logger.firmware && <>{loggerSheet.firmware(logger.firmware)}</>}.
      </p>
      <div className="mb-2 flex flex-wrap items-center justify-between gap-2">
        <h3 className="text-[15px]">{loggerSheet.tokens}</h3>
        {mayManage && (
          <Button onClick={onNew}>
            {alive.length === 0 ? loggerSheet.makeFirstToken : loggerSheet.makeNewToken}
          </Button>
        )}
      </div>
      <Table<LoggerTokenView>
        caption={loggerSheet.tokensOfLogger(logger.serial)}
        rows={logger.tokens}
        rowKey={(t) => t.id}
        empty={<Notice kind="empty" title={loggerSheet.itHasNoToken} />}
        columns={[
          {
            key: 'name',
            label: loggerSheet.token,
            cell: (t) => (
              <>
                <span className="font-medium">{t.name || loggerSheet.unnamed}</span>
                <span className="block text-sm text-ink-2 md:hidden">
                  {loggerSheet.lastUsed}
                  {at(t.lastUsedAt)}
                </span>
              </>
            ),
          },
          {
            key: 'state',
            label: loggerSheet.state,
            cell: (t) => {
              const { state, words, shape } = stateWords(t, now);
              return (
                <>
                  <Tag tone={TONE[state]} shape={shape}>
                    {words}
                  </Tag>
                  {t.endsAt && (
                    <span className="block text-sm text-ink-2">
                      {at(t.endsAt)}
                      {t.endedBy && loggerSheet.endedBy(t.endedBy)}
                    </span>
                  )}
                </>
              );
            },
          },
          {
            key: 'made',
            label: loggerSheet.made,
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
            label: loggerSheet.lastUsedHeading,
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
            label: loggerSheet.end,
            numeric: true,
            cell: (t) =>
              mayManage &&
              stateWords(t, now).state !== 'ended' && (
                <button
                  type="button"
                  className="target px-1 text-petrol hover:underline"
                  aria-label={loggerSheet.endNowLabel(t.name)}
                  onClick={() => onEnd(t)}
                >
                  {loggerSheet.endNow}
                </button>
              ),
          },
        ]}
      />
      <h3 className="mb-1 mt-6 text-[15px]">
        {logger.refused === 0 ? loggerSheet.nothingOfItWas : loggerSheet.refusedUntilNow(logger.refused)}
      </h3>
      {logger.refusals.length > 0 && (
        <Table
          caption={loggerSheet.refusalsCaption(logger.serial)}
          rows={logger.refusals}
          rowKey={(r) => `${r.field} ${r.reason} ${r.firstAt}`}
          columns={[
            {
              key: 'what',
              label: loggerSheet.newestRefusals,
              cell: (r) => (
                <span className="break-words">
                  <code className="text-sm">{r.field}</code> {r.reason}
                </span>
              ),
            },
            { key: 'count', label: loggerSheet.times, numeric: true, cell: (r) => number(r.count) },
            { key: 'first', label: loggerSheet.first, from: 'md', cell: (r) => at(r.firstAt) },
            { key: 'last', label: loggerSheet.last, cell: (r) => at(r.lastAt) },
          ]}
        />
      )}
      {logger.wrongTokens && (
        <p className="mt-3 text-[15px] text-ink-2">
          {loggerSheet.withTokenThatNobody(logger.wrongTokens.count)}
          {logger.lastAddress}
          {loggerSheet.theLastOne}
          {at(logger.wrongTokens.lastAt)}
          {loggerSheet.otherDevicesMayShare}
        </p>
      )}
    </Sheet>
  );
}
