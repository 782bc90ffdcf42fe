import { useState } from 'react';
import { checkDefinition } from '../../domain/commissioning/checks/list';
import { STAGE_WORDS } from '../../words/domain-reading-stages';
import { FIELD_AT } from '../../components/readings/form-choices';
import { Button } from '../../components/ui/Button';
import { volts } from '../../drawings/numbers';
import { corrected, kept, type Waiting } from '../../lib/capture-queue';
import type { CaptureSnapshot } from '../../schemas/api/capture';
import type { CheckRecord } from '../../schemas/api/checks';
import type { ReadingRecord } from '../../schemas/api/readings';
import { RESULT_WORDS } from './records';
import type { SiteProps } from './screen';
import { PLACE_OF, VIEW_DEFAULTS, type CaptureView } from './view';
import { decision } from '../../words/capture';

/** What a record says, a line each. */
function linesOf(site: CaptureSnapshot, kind: Waiting['kind'], record: unknown): string[] {
  if (kind === 'reading') {
    const r = record as ReadingRecord;
    return [volts(r.voltage), `${STAGE_WORDS[r.stage]}, ${r.light}`, ...(r.note ? [r.note] : [])];
  }
  if (kind === 'check') {
    const c = record as CheckRecord;
    const definition = checkDefinition(c.check);
    const figures = definition.figures.flatMap((f) => {
      const value = c.figures[f.key];
      if (value === undefined) return [];
      if (f.kind === 'number') return [`${f.name}: ${String(value).replace('-', '−')} ${f.unit}`];
      const words =
        f.kind === 'choice'
          ? f.options.find((o) => o.value === value)?.words
          : site.connectors.find((t) => t.id === value)?.name;
      return [`${f.name}: ${words ?? String(value)}`];
    });
    return [RESULT_WORDS[c.result], ...figures, ...(c.reason ? [c.reason] : []), ...(c.note ? [c.note] : [])];
  }
  return [];
}

/** The screen on which a record is put right, filled in with it. */
function formFor(record: Waiting): Partial<CaptureView> {
  const base = { ...VIEW_DEFAULTS, string: record.string, fix: record.ref };
  if (record.kind === 'check')
    return { ...base, part: 'checks', check: (record.body as unknown as CheckRecord).check };
  const r = record.body as unknown as ReadingRecord;
  const place = PLACE_OF[r.kind];
  return {
    ...base,
    part: 'readings',
    stage: r.stage,
    light: r.light,
    commanded: r.commanded,
    meter: r.meterMode,
    at: place,
    [FIELD_AT[place]]: String(r.voltage).replace('-', '−'),
  };
}

/** A record that its person has to decide on: both versions of a conflict, or why it was refused. */
export function Decision({ phone, site, change, say, record }: SiteProps & { record: Waiting }) {
  const [sure, setSure] = useState(false);
  const [fault, setFault] = useState('');
  const attempt = (work: Promise<void> | undefined, words: string) => {
    work?.then(
      () => say(words),
      (error: unknown) => setFault(error instanceof Error ? error.message : decision.itCouldNotBe),
    );
  };
  const here = record.site === site.site.id;
  const current = record.current as (ReadingRecord & CheckRecord) | null;
  const late = record.problem?.fields.some((f) => /(^|\.)at$/.test(f.field)) ?? false;
  return (
    <div className="mt-3 space-y-3">
      {record.state === 'conflict' && current ? (
        <>
          <p className="text-[15px]">
            {decision.recordedThisToo(current.person, current.at, site.site.timeZone)}
          </p>
          <dl className="grid grid-cols-2 gap-3">
            {(
              [
                [decision.yours, record.body],
                [current.person, current],
              ] as const
            ).map(([whose, version]) => (
              <div key={whose} className="border border-rule p-2">
                <dt className="text-sm text-ink-2">{whose}</dt>
                {linesOf(site, record.kind, version).map((line) => (
                  <dd key={line} className="whitespace-pre-line break-words">
                    {line}
                  </dd>
                ))}
              </div>
            ))}
          </dl>
          <div className="grid grid-cols-2 gap-2">
            <Button
              className="min-h-[48px]"
              onClick={() => attempt(phone?.change([kept(record, current.ref)]), decision.yoursGoesAgainAnd)}
            >
              {decision.keepMine}
            </Button>
            <Button
              className="min-h-[48px]"
              onClick={() =>
                attempt(phone?.leaveOut(record.ref, current.ref), decision.theRecordOfStands(current.person))
              }
            >
              {decision.keepTheirs}
            </Button>
            {record.kind === 'check' && here && (
              <Button className="col-span-2 min-h-[48px]" onClick={() => change(formFor(record))}>
                {decision.putBothIntoOne}
              </Button>
            )}
          </div>
        </>
      ) : (
        <>
          <div className="border border-dashed border-rust bg-rust-wash p-3 text-[15px] text-rust-ink">
            <p className="font-medium">{record.problem?.message ?? decision.theServerRefusedIt}</p>
          </div>
          <div className="grid grid-cols-2 gap-2">
            {record.kind !== 'photo' && here && (
              <Button className="min-h-[48px]" onClick={() => change(formFor(record))}>
                {decision.changeIt}
              </Button>
            )}
            {late && (
              <Button
                className="min-h-[48px]"
                onClick={() =>
                  attempt(
                    phone?.change([
                      corrected(record, { ...record.body, at: new Date().toISOString() }, record.label),
                    ]),
                    decision.itGoesAgainWith,
                  )
                }
              >
                {decision.sendWithTheTime}
              </Button>
            )}
            <Button
              className="min-h-[48px]"
              onClick={() =>
                attempt(phone?.change([corrected(record, record.body, record.label)]), decision.itGoesAgain)
              }
            >
              {decision.sendAgain}
            </Button>
            {sure ? (
              <Button
                className="min-h-[48px] border-rust text-rust-ink"
                onClick={() => attempt(phone?.leaveOut(record.ref), decision.leftOut)}
              >
                {decision.yesLeaveItOut}
              </Button>
            ) : (
              <Button className="min-h-[48px]" onClick={() => setSure(true)}>
                {decision.leaveItOut}
              </Button>
            )}
          </div>
        </>
      )}
      {fault && (
        <p role="alert" className="font-medium text-rust-ink">
          {fault}
        </p>
      )}
    </div>
  );
}
