import { useMemo } from 'react';
import { readingAround } from '../../domain/commissioning/readings/around';
import { judgeReading } from '../../domain/commissioning/readings/judge-reading';
import { READING_KINDS, type ReadingStage } from '../../domain/commissioning/readings/stages';
import { KIND_WORDS, STAGE_WORDS } from '../../words/domain-reading-stages';
import { Button } from '../../components/ui/Button';
import { Sheet } from '../../components/ui/Sheet';
import { FIELD_AT } from '../../components/readings/form-choices';
import { volts } from '../../drawings/numbers';
import { clockOrDate } from '../../drawings/times';
import type { ShownReading } from '../../lib/capture-records';
import type { CaptureSnapshot, CaptureString } from '../../schemas/api/capture';
import { PLACE_OF, type CaptureView } from './view';
import { recordedReadings } from '../../words/capture';

interface Props {
  site: CaptureSnapshot;
  string: CaptureString;
  stage: ReadingStage;
  change: (some: Partial<CaptureView>) => void;
}

/** What was read at this string and stage, each with what it said; a new one takes its place. */
export function RecordedReadings({ site, string, stage, change }: Props) {
  const rows = useMemo(
    () =>
      READING_KINDS.flatMap((kind) => {
        const reading: ShownReading | undefined = string.readings.find(
          (r) => r.stage === stage && r.kind === kind,
        );
        if (!reading) return [];
        const finding = reading.finding ?? judgeReading(reading, readingAround(site, string.id, reading));
        return [{ reading, finding }];
      }),
    [site, string, stage],
  );
  if (rows.length === 0) return null;
  return (
    <Sheet title={recordedReadings.recordedStage(STAGE_WORDS[stage])} level={2}>
      <ul className="-my-2 divide-y divide-rule-faint">
        {rows.map(({ reading, finding }) => (
          <li key={reading.kind} className="flex items-center gap-3 py-2">
            <div className="min-w-0 flex-1">
              <p className="font-medium">
                {KIND_WORDS[reading.kind]} <strong>{volts(reading.voltage)}</strong>
              </p>
              <p className="text-sm text-ink-2">{finding.headline}</p>
              <p className="text-sm text-ink-2">
                {clockOrDate(reading.at, site.at, site.site.timeZone)}, {reading.person}
                {reading.waiting ? recordedReadings.waitingToBeSent : ''}
              </p>
            </div>
            <Button
              className="min-h-[44px]"
              onClick={() => {
                const place = PLACE_OF[reading.kind];
                change({
                  at: place,
                  [FIELD_AT[place]]: String(reading.voltage).replace('-', '−'),
                  light: reading.light,
                  commanded: reading.commanded,
                  meter: reading.meterMode,
                });
                window.scrollTo({ top: 0 });
              }}
              aria-label={recordedReadings.correctKind(KIND_WORDS[reading.kind])}
            >
              {recordedReadings.correct}
            </Button>
          </li>
        ))}
      </ul>
    </Sheet>
  );
}
