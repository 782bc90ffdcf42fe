import { Suspense, useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Dialog } from '../../components/ui/Dialog';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { Table } from '../../components/ui/Table';
import { Tag } from '../../components/ui/Tag';
import { CONNECTOR_CLAUSE } from '../../domain/equipment/connectors';
import { fullTime } from '../../drawings/times';
import { ApiError, api } from '../../lib/api';
import { late } from '../../lib/late';
import type { ConnectorItem, PairItem } from '../../schemas/api/equipment';
import { paths } from '../../schemas/paths';
import { pairsSheet } from '../../words/equipment';

const PairForm = late(async () => (await import('./PairForm')).PairForm);

interface Props {
  pairs: readonly PairItem[];
  connectors: readonly ConnectorItem[];
  /** A manager. */
  mayRecord: boolean;
  timeZone: string;
}

/** Which different connector types a document says may be mated: recorded by a manager, ended but never erased. */
export function PairsSheet({ pairs, connectors, mayRecord, timeZone }: Props) {
  const [recording, setRecording] = useState(false);
  const [ending, setEnding] = useState<PairItem | null>(null);
  const [fault, setFault] = useState<string | null>(null);
  const end = async (pair: PairItem) => {
    try {
      await api(paths.api.connectorPair(pair.id), { method: 'DELETE' });
      window.location.reload();
    } catch (error) {
      if (!(error instanceof ApiError)) throw error;
      setFault(error.message);
    }
  };
  return (
    <Sheet
      flush
      title={pairsSheet.documentedPairsOfDifferent}
      id="pairs"
      className="mt-6"
      aside={CONNECTOR_CLAUSE}
    >
      <p className="mb-3 max-w-[760px] text-ink-2">{pairsSheet.whereAStringMates}</p>
      <Table
        caption={pairsSheet.pairsOfConnectorTypes}
        rows={pairs}
        rowKey={(p) => p.id}
        columns={[
          {
            key: 'pair',
            label: pairsSheet.pair,
            cell: (p) => (
              <>
                <span className="font-medium">{pairsSheet.firstWithSecond(p.first.name, p.second.name)}</span>
                <span className="block text-sm text-ink-2 md:hidden">{p.evidence}</span>
              </>
            ),
          },
          {
            key: 'evidence',
            label: pairsSheet.evidence,
            from: 'md',
            cell: (p) => (
              <>
                {p.evidence}
                {p.files.map((f) => (
                  <a key={f.id} href={paths.api.attachment(f.id)} className="link block text-sm">
                    {f.name}
                  </a>
                ))}
              </>
            ),
          },
          {
            key: 'by',
            label: pairsSheet.recordedBy,
            from: 'sm',
            cell: (p) => (
              <>
                {p.recordedBy}
                <span className="block text-sm text-ink-2">{fullTime(p.recordedAt, timeZone)}</span>
              </>
            ),
          },
          {
            key: 'state',
            label: pairsSheet.state,
            className: 'text-right sm:text-left',
            cell: (p) =>
              p.endedAt ? (
                <Tag tone="slate" title={fullTime(p.endedAt, timeZone)}>
                  {pairsSheet.ended}
                </Tag>
              ) : (
                <span className="inline-flex flex-wrap items-center justify-end gap-x-3 gap-y-1">
                  {pairsSheet.inForce}
                  {mayRecord && (
                    <Button className="!px-3 !text-sm" onClick={() => setEnding(p)}>
                      {pairsSheet.end}
                    </Button>
                  )}
                </span>
              ),
          },
        ]}
        empty={
          <div className="py-3">
            <Notice kind="empty" title={pairsSheet.noPairIsDocumented}>
              {pairsSheet.onlyIdenticalConnectorsMay}
            </Notice>
          </div>
        }
      />
      {mayRecord ? (
        <Button className="mt-4" onClick={() => setRecording(true)}>
          {pairsSheet.recordADocumentedPair}
        </Button>
      ) : (
        <p className="mt-3 text-sm text-ink-2">{pairsSheet.aManagerRecordsPairs}</p>
      )}
      <Dialog open={recording} title={pairsSheet.recordADocumentedPair} onClose={() => setRecording(false)}>
        <Suspense>
          <PairForm connectors={connectors} onDone={() => window.location.reload()} />
        </Suspense>
      </Dialog>
      <Dialog open={ending !== null} title={pairsSheet.endThisPair} onClose={() => setEnding(null)}>
        {ending && (
          <>
            <p className="mb-4">{pairsSheet.fromNowOnAnd(ending.first.name, ending.second.name)}</p>
            {fault && (
              <div className="mb-4">
                <Notice kind="failed" title={pairsSheet.notEnded}>
                  {fault}
                </Notice>
              </div>
            )}
            <Button weight="primary" onClick={() => void end(ending)}>
              {pairsSheet.endThePair}
            </Button>
          </>
        )}
      </Dialog>
    </Sheet>
  );
}
