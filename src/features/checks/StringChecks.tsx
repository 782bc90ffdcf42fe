import { useEffect, useMemo, useState } from 'react';
import { undocumentedPair } from '../../domain/commissioning/checks/connectors';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { SiteTime } from '../../components/ui/Time';
import type { CaptureString } from '../../schemas/api/capture';
import type { DeskPage } from '../../schemas/api/checks-page';
import { paths } from '../../schemas/paths';
import { CellMark } from './CellMark';
import { Evidence } from './Evidence';
import { AddPhotos, Photos } from './Photos';
import { RecordForm } from './RecordForm';
import { figureText, openString, type Cell, type OpenString } from './open-string';
import type { Signing } from './signing';
import { MARK_WORDS } from './words';
import { stringChecks } from '../../words/checks';

interface Props {
  page: DeskPage;
  string: CaptureString;
  /** The check that was asked for, by its key. */
  focus: string | null;
  mayWrite: boolean;
  mayRecordEvidence: boolean;
  signing: Signing;
  onChanged: () => Promise<unknown>;
  onClose: () => void;
}

/** One string: what blocks its signature, then every check with its record, photos and figures. */
export function StringChecks(props: Props) {
  const { page, string, focus, mayWrite, signing, onClose } = props;
  const row = useMemo(() => openString(page, string), [page, string]);
  const { state, status } = row;
  const { timeZone } = page.sheet.site;
  const [keepPlace, setKeepPlace] = useState(false);
  const missing = state.blocks.filter((b) => b.kind === 'missing').length;
  useEffect(() => {
    document.getElementById(focus ? `check-${focus}` : 'string')?.scrollIntoView({ block: 'nearest' });
  }, [focus]);
  return (
    <Sheet
      id="string"
      title={stringChecks.ofChecksRecorded(string.name, state.recorded, state.asked)}
      aside={
        <span className="flex flex-wrap items-center gap-2">
          <ButtonLink href={paths.string(page.sheet.site.id, string.id)}>
            {stringChecks.openWhich(string.name)}
          </ButtonLink>
          <Button onClick={onClose}>{stringChecks.close}</Button>
        </span>
      }
    >
      {row.amiss.length > 0 && (
        <ul className="mb-3 space-y-2">
          {row.amiss.map((b) => (
            <li key={b.check} className="rounded bg-rust-wash px-3 py-2 text-rust-ink">
              <strong className="font-semibold">{b.words}</strong> {b.remedy}
            </li>
          ))}
        </ul>
      )}
      <div className="mb-2 flex flex-wrap items-center gap-3">
        {string.signOff && (
          <p>
            {stringChecks.signedBy(string.signOff.person)}
            <SiteTime at={string.signOff.at} now={page.sheet.at} timeZone={timeZone} zone />.{' '}
            {string.signOff.stale && (
              <strong className="font-semibold text-rust-ink">
                {stringChecks.somethingWasRecordedSince}
              </strong>
            )}
          </p>
        )}
        {mayWrite && status === 'ready' && (
          <Button weight="primary" disabled={signing.busy} onClick={() => void signing.sign([row])}>
            {stringChecks.signOff(string.name)}
          </Button>
        )}
        {missing > 0 && <p className="text-ink-2">{stringChecks.stillToRecordBefore(missing)}</p>}
      </div>
      {status === 'ready' && state.remarks.length > 0 && (
        <details className="mb-3 text-ink-2">
          <summary className="target inline-flex cursor-pointer items-center">
            {stringChecks.worthKnowingBeforeSigning(state.remarks.length)}
          </summary>
          <ul className="list-disc pl-5">
            {state.remarks.map((r) => (
              <li key={r}>{r}</li>
            ))}
          </ul>
        </details>
      )}
      {mayWrite && (
        <label className="mb-1 inline-flex min-h-[44px] items-center gap-2 text-sm text-ink-2">
          <input
            type="checkbox"
            className="h-5 w-5 accent-[var(--petrol)]"
            checked={keepPlace}
            onChange={(event) => setKeepPlace(event.target.checked)}
          />
          {stringChecks.photosKeepThePlace}
        </label>
      )}
      <ol className="divide-y divide-rule-faint border-t border-rule-faint">
        {row.cells.map((cell) => (
          <CheckItem key={cell.check.key} row={row} cell={cell} keepPlace={keepPlace} {...props} />
        ))}
      </ol>
    </Sheet>
  );
}

function CheckItem({
  page,
  row,
  cell,
  keepPlace,
  mayWrite,
  mayRecordEvidence,
  onChanged,
}: Props & { row: OpenString; cell: Cell; keepPlace: boolean }) {
  const [editing, setEditing] = useState(false);
  const { check, record, judged, mark, photos } = cell;
  const { site } = page.sheet;
  const figures = figureText(cell, row.context.connectors);
  const pair = record && judged?.fireRisk ? undocumentedPair(record.figures, row.context) : null;
  return (
    <li id={`check-${check.key}`} className="flex scroll-mt-24 flex-col gap-x-4 gap-y-2 py-3 lg:flex-row">
      <div className="flex min-w-0 flex-1 gap-3">
        <CellMark mark={mark} />
        <div className="min-w-0 flex-1">
          <div className="flex flex-wrap items-baseline gap-x-4">
            <h3 className="font-semibold">
              {check.name}
              <span className="font-normal text-ink-2">: {MARK_WORDS[mark]}</span>
            </h3>
            {record && (
              <p className="text-sm text-ink-2">
                {record.person}, <SiteTime at={record.at} now={page.sheet.at} timeZone={site.timeZone} />
              </p>
            )}
          </div>
          <p className="text-ink-2">{check.asks}</p>
          {(figures || record?.reason || record?.note) && (
            <p className="mt-0.5">{[figures, record?.reason, record?.note].filter(Boolean).join('. ')}</p>
          )}
          {check.warning && !record && <Notice kind="stale" title={check.warning} />}
          {judged && judged.words.length > 0 && (
            <p className={`mt-1 ${judged.weight === 'blocks' ? 'text-rust-ink' : 'text-ink-2'}`}>
              {judged.words.join(' ')} {judged.remedy} <span className="text-sm">({judged.source})</span>
            </p>
          )}
          <Photos
            photos={photos}
            of={`${row.string.name}, ${check.name.toLowerCase()}`}
            now={page.sheet.at}
            timeZone={site.timeZone}
          />
          {pair && mayRecordEvidence && <Evidence site={site.id} pair={pair} onRecorded={onChanged} />}
          {pair && !mayRecordEvidence && (
            <p className="mt-1 text-sm text-ink-2">{stringChecks.aManagerCanRecord}</p>
          )}
          {editing && (
            <>
              <p className="mt-2 text-sm text-ink-2">
                {check.how} <span>({check.source})</span>
              </p>
              <RecordForm
                sheet={page.sheet}
                row={row}
                cell={cell}
                onCancel={() => setEditing(false)}
                onSaved={async () => {
                  await onChanged();
                  setEditing(false);
                }}
              />
            </>
          )}
        </div>
      </div>
      {mayWrite && !editing && (
        <div className="flex flex-none flex-wrap items-start gap-2 pl-[34px] lg:max-w-[320px] lg:justify-end lg:pl-0">
          <Button onClick={() => setEditing(true)}>
            {record ? stringChecks.recordAgain : stringChecks.record}
            <span className="sr-only">: {check.name}</span>
          </Button>
          {record && (
            <AddPhotos
              site={site.id}
              string={row.string.id}
              subject="install_check"
              subjectRef={record.ref}
              label={stringChecks.addPhotos}
              keepPlace={keepPlace}
              onStored={onChanged}
            />
          )}
        </div>
      )}
    </li>
  );
}
