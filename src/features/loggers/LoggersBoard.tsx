import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { ButtonLink } from '../../components/ui/Button';
import { Fold } from '../../components/ui/Fold';
import { Heading } from '../../components/ui/Heading';
import { NotRead } from '../../components/ui/NotRead';
import { Notice } from '../../components/ui/Notice';
import { useNow } from '../../components/ui/Time';
import { queryClient } from '../../lib/query-client';
import type { LoggersPage, LoggerTokenView, LoggerView } from '../../schemas/api/loggers';
import { paths } from '../../schemas/paths';
import { EndTokenDialog } from './EndTokenDialog';
import { ByHttps } from './ByHttps';
import { LoggerSheet } from './LoggerSheet';
import { NewTokenDialog } from './NewTokenDialog';
import { loggersQuery } from './queries';
import { finding } from '../../words/loggers-sentences';
import { loggersBoard } from '../../words/loggers';

interface Props {
  initial: LoggersPage;
  mayManage: boolean;
}
type Doing = { logger: LoggerView } & ({ kind: 'new' } | { kind: 'end'; token: LoggerTokenView });

/** Who may speak for a site, when each last did, and what was refused. */
export function LoggersBoard({ initial, mayManage }: Props) {
  const { data: page, error, refetch } = useQuery(loggersQuery(initial), queryClient());
  const [doing, setDoing] = useState<Doing | null>(null);
  const now = useNow(page.at);
  const { site } = page;
  const said = finding(page, now);
  const operating = site.stage === 'operating';
  const close = () => setDoing(null);
  return (
    <>
      <Heading
        crumbs={[
          { label: loggersBoard.fleet, href: paths.fleet() },
          { label: site.name, href: paths.site(site.id) },
          { label: loggersBoard.loggers },
        ]}
        finding={said.heading}
        sentence={said.sentence}
        actions={
          <ButtonLink href={paths.api.loggersCsv(site.id)} download>
            CSV
          </ButtonLink>
        }
      />
      <NotRead
        error={error}
        title={loggersBoard.notReadAnew}
        kind="failed"
        onRetry={() => refetch()}
        className="mb-6"
      >
        {loggersBoard.whatIsShownMay}
      </NotRead>
      <div className="grid grid-cols-1 gap-6">
        {page.loggers.length === 0 && (
          <Notice
            kind="empty"
            title={loggersBoard.noLoggerYet}
            action={<ButtonLink href={paths.asBuilt(site.id)}>{loggersBoard.lookAtTheAs}</ButtonLink>}
          />
        )}
        {page.loggers.map((logger) => (
          <LoggerSheet
            key={logger.id}
            logger={logger}
            now={now}
            timeZone={site.timeZone}
            mayManage={mayManage}
            onNew={() => setDoing({ kind: 'new', logger })}
            onEnd={(token) => setDoing({ kind: 'end', logger, token })}
          />
        ))}
        <Fold title={loggersBoard.aLoggerWithoutOur} opens={loggersBoard.how}>
          <ByHttps />
        </Fold>
      </div>
      {doing?.kind === 'new' && (
        <NewTokenDialog site={site.id} logger={doing.logger} operating={operating} onClose={close} />
      )}
      {doing?.kind === 'end' && (
        <EndTokenDialog
          site={site.id}
          logger={doing.logger}
          token={doing.token}
          operating={operating}
          onClose={close}
        />
      )}
    </>
  );
}
