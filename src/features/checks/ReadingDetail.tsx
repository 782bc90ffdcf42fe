import { useEffect, useRef, useState } from 'react';
import { KIND_WORDS, STAGE_WORDS } from '../../words/domain-reading-stages';
import { READING_CAUTION } from '../../domain/readings/words';
import { cautionParts } from '../../components/readings/words';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Caution } from '../../components/ui/Caution';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { SiteTime } from '../../components/ui/Time';
import { percent, volts } from '../../drawings/numbers';
import { ApiError, api } from '../../lib/api';
import { newRef } from '../../lib/capture-records';
import type { DeskPage } from '../../schemas/api/checks-page';
import type { ReadingInput, ReadingRecord } from '../../schemas/api/readings';
import { paths } from '../../schemas/paths';
import { AddPhotos, Photos } from './Photos';
import type { ReadingHere, ReadingRow } from './readings-rows';
import { OUTCOME_WORDS } from './readings-words';
import { readingDetail } from '../../words/checks';

interface Props {
  page: DeskPage;
  row: ReadingRow;
  mayWrite: boolean;
  onChanged: () => Promise<unknown>;
  onClose: () => void;
}

/** One string at one stage: each reading with what it means, what else it could be, and what it rests on. */
export function ReadingDetail({ page, row, mayWrite, onChanged, onClose }: Props) {
  const { site } = page.sheet;
  useEffect(() => {
    document.getElementById('reading')?.scrollIntoView({ block: 'nearest' });
  }, []);
  const readings = [row.between, row.positive, row.negative].filter((r) => r !== null);
  const cautions = row.between?.finding?.cautions ?? [READING_CAUTION];
  return (
    <Sheet
      id="reading"
      title={`${row.string.name} ${STAGE_WORDS[row.stage]}: ${OUTCOME_WORDS[row.outcome]}`}
      aside={
        <span className="flex flex-wrap gap-2">
          <ButtonLink href={paths.string(site.id, row.string.id)}>
            {readingDetail.openWhich(row.string.name)}
          </ButtonLink>
          <Button onClick={onClose}>{readingDetail.close}</Button>
        </span>
      }
    >
      {readings.length === 0 && (
        <Notice
          kind="empty"
          title={readingDetail.nothingWasReadHere}
          action={
            mayWrite && <ButtonLink href={paths.capture(site.id)}>{readingDetail.recordOnTheRoof}</ButtonLink>
          }
        />
      )}
      <ul className="divide-y divide-rule-faint">
        {readings.map((r) => (
          <Reading key={r.ref} page={page} row={row} reading={r} mayWrite={mayWrite} onChanged={onChanged} />
        ))}
      </ul>
      {row.earth && (
        <p className="mt-2 text-ink-2">{readingDetail.readingsToEarthTogether(row.earth.words)}</p>
      )}
      {row.now && row.between && mayWrite && (
        <JudgeAgain page={page} row={row} reading={row.between} onChanged={onChanged} />
      )}
      <div className="mt-4 space-y-3">
        {cautions.map((c) => {
          const { strong, rest } = cautionParts(c);
          return (
            <Caution key={c} strong={strong}>
              {rest}
            </Caution>
          );
        })}
      </div>
    </Sheet>
  );
}

function Reading({
  page,
  row,
  reading,
  mayWrite,
  onChanged,
}: Omit<Props, 'onClose'> & { reading: ReadingHere }) {
  const { site } = page.sheet;
  const { finding } = reading;
  const photos = page.files.filter((f) => f.subjectRef === reading.ref);
  return (
    <li className="py-3">
      <h3 className="font-semibold">
        {KIND_WORDS[reading.kind]}: {volts(reading.voltage)}
        {finding && <span className="font-normal">. {finding.headline}</span>}
      </h3>
      <p className="text-ink-2">
        {finding && readingDetail.expected(finding.expected)}
        {finding?.expectedLowV !== null && finding?.expectedHighV !== null && finding
          ? readingDetail.thatReadsTo(finding.expectedLowV, finding.expectedHighV)
          : ''}
        {finding && finding.siblings.length > 0 && readingDetail.comparedWith(finding.siblings.join(', '))}
        {readingDetail.charAtLightMeterModeCommanded(
          reading.light.charAt(0),
          reading.light.slice(1),
          reading.meterMode,
          reading.commanded,
        )}
      </p>
      {finding && finding.likely.length > 1 && (
        <ol className="mt-1 text-ink-2">
          {finding.likely.map((h) => (
            <li key={`${h.kind} ${h.count}`} className="flex justify-between gap-4 sm:max-w-[560px]">
              <span>{h.words}</span>
              <span>{h.probability < 0.005 ? readingDetail.under : percent(h.probability)}</span>
            </li>
          ))}
        </ol>
      )}
      {reading.note && <p className="mt-1">{reading.note}</p>}
      <p className="mt-1 text-sm text-ink-2">
        {reading.person}, <SiteTime at={reading.at} now={page.sheet.at} timeZone={site.timeZone} zone />
      </p>
      <Photos
        photos={photos}
        of={`${row.string.name}, ${KIND_WORDS[reading.kind]}`}
        now={page.sheet.at}
        timeZone={site.timeZone}
      />
      {mayWrite && (
        <div className="mt-2">
          <AddPhotos
            site={site.id}
            string={row.string.id}
            subject="meter_reading"
            subjectRef={reading.ref}
            label={readingDetail.addPhotos}
            keepPlace={false}
            onStored={onChanged}
          />
        </div>
      )}
    </li>
  );
}

/** Strings measured since say more about a reading than was known when it was taken: keeps the new judgement. */
function JudgeAgain({
  page,
  row,
  reading,
  onChanged,
}: Pick<Props, 'page' | 'row' | 'onChanged'> & { reading: ReadingHere }) {
  const ref = useRef(newRef());
  const [refused, setRefused] = useState<ApiError | null>(null);
  const [busy, setBusy] = useState(false);
  const { now } = row;
  if (!now) return null;
  const save = async () => {
    setBusy(true);
    const body: ReadingInput = {
      ref: ref.current,
      stringId: row.string.id,
      stage: reading.stage,
      kind: reading.kind,
      light: reading.light,
      meterMode: reading.meterMode,
      commanded: reading.commanded,
      voltage: reading.voltage,
      note: reading.note,
      at: reading.at,
      supersedes: reading.ref,
    };
    try {
      await api<ReadingRecord>(paths.api.readings(page.sheet.site.id), { method: 'POST', body });
      await onChanged();
    } catch (error) {
      if (!(error instanceof ApiError)) throw error;
      setRefused(error);
    } finally {
      setBusy(false);
    }
  };
  return (
    <div className="mt-2">
      <Notice
        kind="stale"
        title={readingDetail.withMeasuredBesideIt(
          now.siblings.join(', '),
          OUTCOME_WORDS[now.outcome],
          now.headline,
        )}
        action={
          <Button disabled={busy} onClick={() => void save()}>
            {readingDetail.keepThisJudgement}
          </Button>
        }
      >
        {refused?.message}
      </Notice>
    </div>
  );
}
