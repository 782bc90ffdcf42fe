import { useCallback, useEffect, useRef, useState } from 'react';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Choice } from '../../components/ui/Choice';
import { Heading } from '../../components/ui/Heading';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { serialOfCode } from '../../domain/commissioning/import/code';
import type { AsBuilt } from '../../schemas/api/as-built';
import { paths } from '../../schemas/paths';
import { Camera } from './Camera';
import { ClashList } from './ClashList';
import { judge, nextGap, nextString, placeOf, progressWords, type Judged } from './model';
import { PositionStrip } from './PositionStrip';
import { Settings, useSettings } from './Settings';
import { beep, tremble } from './signal';
import { useSerials } from './use-serials';
import { serials } from '../../words/serials';
import { capital } from '../../words/domain-counts';

interface Props {
  initial: AsBuilt;
  person: string;
  /** Public identifier of the string to begin with. */
  string: string | null;
}
const REASONS = [serials.unitReplaced, serials.misreadBefore, serials.wrongOnTheDrawing] as const;

/** Serials read on site, position by position, with one hand. */
export function Serials({ initial, person, string: first }: Props) {
  const work = useSerials(initial, person);
  const { strings } = work;
  const [stringId, setStringId] = useState(
    () =>
      strings.find((s) => s.id === first)?.id ??
      strings.find((s) => nextGap(s, 0) !== null)?.id ??
      strings[0]?.id ??
      '',
  );
  const string = strings.find((s) => s.id === stringId) ?? strings[0];
  // until somebody chooses or types, the first gap: what waits on this phone fills some of them after a reload
  const [chosen, setChosen] = useState<number | null>(null);
  const position = chosen ?? (string ? (nextGap(string, 0) ?? 1) : 1);
  const [typed, setTypedText] = useState('');
  const setTyped = (text: string) => {
    setChosen(position);
    setTypedText(text);
  };
  const [judged, setJudged] = useState<Judged | null>(null);
  const [camera, setCamera] = useState(false);
  const [settings, setSettings] = useSettings();
  const [said, setSaid] = useState('');
  const field = useRef<HTMLInputElement>(null);

  const signal = useCallback(
    (kept: boolean) => {
      if (settings.beep) beep(kept);
      if (settings.tremble) tremble(kept);
    },
    [settings],
  );
  const go = useCallback((to: { string?: string; position: number }) => {
    if (to.string !== undefined) {
      setStringId(to.string);
      const address = new URL(window.location.href);
      address.searchParams.set('string', to.string);
      window.history.replaceState(null, '', address);
    }
    setChosen(to.position);
    setTypedText('');
    setJudged(null);
  }, []);
  useEffect(() => {
    field.current?.focus({ preventScroll: true });
  }, [position, stringId]);

  if (!string)
    return (
      <>
        <Crumbs initial={initial} finding={serials.thisSiteHasNo} sentence={serials.makeThemFirstThen} />
        <div className="flex flex-wrap gap-2">
          <ButtonLink weight="primary" href={paths.asBuiltImport(initial.site.id)}>
            {serials.bringThemInFrom}
          </ButtonLink>
          <ButtonLink href={paths.asBuilt(initial.site.id)}>{serials.enterThemByHand}</ButtonLink>
        </div>
      </>
    );

  const slot = string.slots.find((s) => s.position === position) ?? string.slots[0];
  const now = slot?.serial ?? null;
  const follow = nextString(strings, string.id);

  const keep = (serial: string, move: boolean, reason: string) => {
    const from = move ? placeOf(strings, serial, { string: string.id, position }) : null;
    work.enter(
      { string: string.id, position, serial, expected: now, move, reason },
      from && { string: from.string.id, position: from.position },
    );
    signal(true);
    setSaid(serials.isAtPosition(serial, string.name, position));
    const after = {
      ...string,
      slots: string.slots.map((s) => (s.position === position ? { ...s, serial } : s)),
    };
    const gap = nextGap(after, position);
    go({ position: gap ?? Math.min(position + 1, string.slots.length) });
  };
  const enter = (text: string) => {
    const result = judge(strings, string, position, text);
    if (result.kind === 'keep') keep(result.serial, false, '');
    else if (result.kind === 'same') {
      signal(true);
      setSaid(serials.isThereAlready(now));
      go({ position: nextGap(string, position) ?? Math.min(position + 1, string.slots.length) });
    } else {
      setJudged(result);
      signal(false);
    }
  };
  const onCode = (text: string) => {
    const serial = serialOfCode(text);
    setTyped(serial);
    setJudged(null);
    if (settings.atOnce) enter(serial);
    else {
      const result = judge(strings, string, position, serial);
      signal(result.kind === 'keep' || result.kind === 'same');
      setJudged(result.kind === 'keep' || result.kind === 'same' ? null : result);
    }
  };
  const undo = () => {
    const back = work.undo();
    if (!back) return;
    setSaid(serials.takenBack);
    go(back);
  };
  const skip = () => go({ position: position >= string.slots.length ? 1 : position + 1 });

  return (
    <>
      <Crumbs
        initial={initial}
        finding={<>{serials.positionOf(string.name, position, string.slots.length)}</>}
        sentence={
          <>
            {slot?.roofPlace ? <strong>{capital(slot.roofPlace)}.</strong> : null} {progressWords(string)}.
          </>
        }
      />
      <div className="mx-auto grid max-w-[720px] gap-4 lg:mx-0">
        <p className="sr-only" role="status">
          {said}
        </p>
        {work.clashes.length > 0 && (
          <ClashList clashes={work.clashes} strings={strings} onInsist={work.insist} onDrop={work.drop} />
        )}
        {work.waiting > 0 && (
          <Notice
            kind="stale"
            title={serials.onThisPhone(work.waiting)}
            action={work.away ? <Button onClick={work.sendNow}>{serials.sendNow}</Button> : undefined}
          >
            {work.away ?? serials.onTheWayTo}
          </Notice>
        )}
        <Sheet
          id="read"
          title={<>{serials.serialAtPosition(string.name, position)}</>}
          aside={now ? serials.now(now) : serials.empty}
        >
          {camera && <Camera onCode={onCode} onClose={() => setCamera(false)} />}
          <form
            className="mt-2 grid gap-3"
            onSubmit={(event) => {
              event.preventDefault();
              enter(typed);
            }}
          >
            <label className="block">
              <span className="sr-only">{serials.serial}</span>
              <input
                ref={field}
                value={typed}
                onChange={(event) => {
                  setTyped(event.target.value);
                  setJudged(null);
                }}
                placeholder={now ?? serials.asOnTheLabel}
                autoCapitalize="characters"
                autoComplete="off"
                autoCorrect="off"
                spellCheck={false}
                enterKeyHint="next"
                aria-invalid={judged?.kind === 'fault' ? true : undefined}
                aria-describedby="judged"
                className="min-h-[60px] w-full rounded border border-ink bg-sheet px-3 text-[24px] font-medium uppercase tracking-[0.01em] placeholder:normal-case placeholder:text-ink-3"
              />
            </label>
            <div id="judged" aria-live="polite">
              {judged && (
                <Question
                  judged={judged}
                  onTake={(text) => {
                    setTyped(text);
                    setJudged(null);
                  }}
                  onKeep={(serial, move, reason) => keep(serial, move, reason)}
                />
              )}
            </div>
            <div className="grid grid-cols-2 gap-2 sm:grid-cols-4">
              <Button type="submit" weight="primary" className="col-span-2 min-h-[56px]">
                {serials.saveAndGoOn}
              </Button>
              <Button className="min-h-[56px]" onClick={skip}>
                {serials.skip}
              </Button>
              <Button className="min-h-[56px]" disabled={!work.canUndo} onClick={undo}>
                {serials.undo}
              </Button>
            </div>
            {!camera && (
              <Button className="min-h-[56px]" onClick={() => setCamera(true)}>
                {serials.readWithTheCamera}
              </Button>
            )}
          </form>
        </Sheet>
        <PositionStrip string={string} position={position} onGo={(p) => go({ position: p })} />
        <div className="grid gap-3 sm:grid-cols-2 sm:items-end">
          <Choice
            label={serials.string}
            value={string.id}
            options={strings.map((s) => ({
              value: s.id,
              label: serials.nameFilterOfSlots(
                s.name,
                s.slots.filter((x) => x.serial !== null).length,
                s.slots.length,
              ),
            }))}
            onChange={(id) => {
              const chosen = strings.find((s) => s.id === id);
              if (chosen) go({ string: id, position: nextGap(chosen, 0) ?? 1 });
            }}
          />
          {follow ? (
            <Button
              className="min-h-[56px]"
              weight={nextGap(string, 0) === null ? 'primary' : 'plain'}
              onClick={() => go({ string: follow.id, position: nextGap(follow, 0) ?? 1 })}
            >
              {serials.goTo(follow.name)}
            </Button>
          ) : (
            <ButtonLink className="min-h-[56px]" href={paths.asBuilt(initial.site.id)}>
              {serials.noOtherStringHas}
            </ButtonLink>
          )}
        </div>
        <Settings settings={settings} onChange={setSettings} />
      </div>
    </>
  );
}

function Crumbs({
  initial,
  finding,
  sentence,
}: {
  initial: AsBuilt;
  finding: React.ReactNode;
  sentence: React.ReactNode;
}) {
  return (
    <Heading
      crumbs={[
        { label: serials.commissioning, href: paths.commissioning() },
        { label: initial.site.name, href: paths.commissioningSite(initial.site.id) },
        { label: serials.serialsOnSite },
      ]}
      finding={finding}
      sentence={sentence}
    />
  );
}

interface QuestionProps {
  judged: Judged;
  onTake: (text: string) => void;
  onKeep: (serial: string, move: boolean, reason: string) => void;
}

/** What stands against a serial, and the ways out. */
function Question({ judged, onTake, onKeep }: QuestionProps) {
  if (judged.kind === 'fault')
    return (
      <div className="border border-rust bg-rust-wash p-3 text-[15px] text-rust-ink">
        <p className="font-medium">{capital(judged.message)}.</p>
        <p>{judged.remedy}</p>
        {judged.suggestion !== null && (
          <Button
            className="mt-2"
            onClick={() => {
              if (judged.suggestion !== null) onTake(judged.suggestion);
            }}
          >
            {serials.writeSuggestion(judged.suggestion)}
          </Button>
        )}
      </div>
    );
  if (judged.kind !== 'elsewhere' && judged.kind !== 'occupied') return null;
  const move = judged.kind === 'elsewhere';
  return (
    <div className="border border-rust bg-rust-wash p-3 text-[15px] text-rust-ink">
      <p className="font-medium">
        {judged.kind === 'elsewhere'
          ? serials.isEnteredAt(judged.serial, judged.place)
          : serials.isEnteredHere(judged.now)}
      </p>
      <p>{judged.kind === 'elsewhere' ? serials.readTheLabelAgain : serials.ifIsRightSay(judged.serial)}</p>
      <div className="mt-2 flex flex-wrap gap-2">
        {REASONS.map((reason) => (
          <Button key={reason} onClick={() => onKeep(judged.serial, move, reason)}>
            {reason}
          </Button>
        ))}
      </div>
    </div>
  );
}
