import { useMemo, useState } from 'react';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Field } from '../../components/ui/Field';
import { Heading } from '../../components/ui/Heading';
import { Notice } from '../../components/ui/Notice';
import { Segmented } from '../../components/ui/Segmented';
import { Sheet } from '../../components/ui/Sheet';
import { outlineFault } from '../../domain/commissioning/roof/outline';
import type { RoofPlan } from '../../schemas/api/roof';
import { paths } from '../../schemas/paths';
import { insertPoint, isPlaced, remarks, slotsOf, spotsOf } from './draft';
import { formFor, readLaying, type LayingForm } from './laying-form';
import { LayPanel } from './LayPanel';
import { OutlinePanel } from './OutlinePanel';
import { PlacesSheet } from './PlacesSheet';
import { RoofCanvas, type DrawnPath } from './RoofCanvas';
import { useRoof } from './use-roof';
import { roofFinding } from '../../words/roof-sentences';
import { roofBoard } from '../../words/roof';

type Mode = 'outline' | 'strings';

/** The roof of a site: its outline, and the strings laid on it row by row. */
export function RoofBoard({ initial, mayWrite }: { initial: RoofPlan; mayWrite: boolean }) {
  const work = useRoof(initial);
  const { plan, draft } = work;
  const [mode, setMode] = useState<Mode>(initial.outline.length > 2 || !mayWrite ? 'strings' : 'outline');
  const [chosen, setChosen] = useState(
    () => (initial.strings.find((s) => !isPlaced(s.slots)) ?? initial.strings[0])?.id ?? '',
  );
  const string = plan.strings.find((s) => s.id === chosen) ?? plan.strings[0];
  const [form, setForm] = useState<LayingForm | null>(() => (string ? formFor(string, null) : null));
  const [planning, setPlanning] = useState(false);
  const [tried, setTried] = useState(false);
  const [reason, setReason] = useState('');

  const placed = useMemo(
    () => new Set(plan.strings.filter((s) => isPlaced(slotsOf(draft, s))).map((s) => s.id)),
    [plan, draft],
  );
  // the string that is chosen, then those after it that have no place yet
  const queue = useMemo(() => {
    if (!string) return [];
    const at = plan.strings.indexOf(string);
    return [string, ...plan.strings.slice(at + 1).filter((s) => !placed.has(s.id))];
  }, [plan, string, placed]);
  const read = useMemo(() => (form ? readLaying(form, queue) : null), [form, queue]);
  const shown = useMemo(() => remarks(plan, draft), [plan, draft]);
  const fault = outlineFault(draft.outline);

  const paths_: DrawnPath[] = [
    ...plan.strings
      .filter((s) => s.id !== string?.id)
      .map((s): DrawnPath => ({ id: s.id, name: s.name, look: 'other', spots: spotsOf(slotsOf(draft, s)) })),
    ...(string
      ? [
          {
            id: string.id,
            name: string.name,
            look: 'chosen' as const,
            spots: spotsOf(slotsOf(draft, string)),
          },
        ]
      : []),
    ...(mode === 'strings' && planning
      ? (read?.laid ?? []).map((l): DrawnPath => ({
          id: l.string.id,
          name: l.string.name,
          look: 'planned',
          spots: l.laid,
        }))
      : []),
  ];
  const start =
    mode === 'strings' && planning && form && read?.laid?.[0]?.laid[0] ? read.laid[0].laid[0] : null;

  const choose = (id: string) => {
    setChosen(id);
    const next = plan.strings.find((s) => s.id === id);
    if (next && form) setForm({ ...form, perRow: fitting(form.perRow, next.slots.length), strings: '1' });
  };
  const lay = () => {
    setTried(true);
    if (!read?.laid || !form) return;
    const { laid, next } = read;
    work.draw((d) => ({
      slots: { ...d.slots, ...Object.fromEntries(laid.map((l) => [l.string.id, l.slots])) },
    }));
    setTried(false);
    setPlanning(false);
    const done = new Set(laid.map((l) => l.string.id));
    const after = queue.find((s) => !done.has(s.id));
    if (after) setChosen(after.id);
    setForm({
      ...form,
      startX: String(Math.round(next.x * 100) / 100),
      startY: String(Math.round(next.y * 100) / 100),
      strings: '1',
    });
  };
  const point = ({ x, y }: { x: number; y: number }) => {
    if (mode === 'outline') work.draw((d) => ({ outline: insertPoint(d.outline, [x, y]) }));
    else if (form) {
      setForm({ ...form, startX: String(x), startY: String(y) });
      setPlanning(true);
    }
  };
  const said = roofFinding(plan, placed.size, draft.outline.length > 2);
  const needsReason = plan.site.stage === 'operating';
  const count = work.changed.strings.length;
  const what = [
    work.changed.outline ? roofBoard.theOutline : '',
    count > 0 ? `${count} ${count === 1 ? roofBoard.string : roofBoard.strings}` : '',
  ]
    .filter(Boolean)
    .join(' and ');

  return (
    <>
      <Heading
        crumbs={[
          { label: roofBoard.commissioning, href: paths.commissioning() },
          { label: plan.site.name, href: paths.commissioningSite(plan.site.id) },
          { label: roofBoard.asBuilt, href: paths.asBuilt(plan.site.id) },
          { label: roofBoard.roof },
        ]}
        finding={said.heading}
        sentence={said.sentence}
        actions={
          mayWrite ? undefined : (
            <ButtonLink href={paths.asBuilt(plan.site.id)}>{roofBoard.lookAtTheAs}</ButtonLink>
          )
        }
      />
      {work.error && (
        <div className="mb-4">
          <Notice
            kind="failed"
            title={work.error.title}
            action={
              work.error.status === 409 ? (
                <span className="flex flex-wrap gap-2">
                  <Button onClick={() => work.reload(true)}>{roofBoard.keepMineAndLook}</Button>
                  <Button onClick={() => work.reload(false)}>{roofBoard.takeTheirs}</Button>
                </span>
              ) : undefined
            }
          >
            {work.error.message}
          </Notice>
        </div>
      )}
      {work.saved && !work.dirty && (
        <div className="mb-4">
          <Notice
            kind="done"
            title={roofBoard.theRoofIsKept}
            action={<ButtonLink href={paths.serials(plan.site.id)}>{roofBoard.readSerialsOnSite}</ButtonLink>}
          />
        </div>
      )}
      <div className="grid items-start gap-6 lg:grid-cols-[minmax(0,1fr)_380px]">
        <div className="grid min-w-0 gap-6">
          <Sheet
            id="roof"
            flush
            title={
              mayWrite ? (
                <Segmented
                  label={roofBoard.whatIsDrawn}
                  look="bold"
                  value={mode}
                  options={[
                    { value: 'outline', label: roofBoard.outline },
                    { value: 'strings', label: roofBoard.strings2 },
                  ]}
                  onChange={setMode}
                />
              ) : (
                roofBoard.fromAbove
              )
            }
            aside={
              mayWrite ? (
                <span className="flex gap-2">
                  <Button disabled={!work.canUndo} onClick={work.undo}>
                    {roofBoard.undo}
                  </Button>
                  <Button disabled={!work.canRedo} onClick={work.redo}>
                    {roofBoard.redo}
                  </Button>
                </span>
              ) : undefined
            }
          >
            <RoofCanvas
              outline={draft.outline}
              paths={paths_}
              start={start}
              mode={mayWrite ? mode : 'look'}
              onPoint={point}
              onMove={(index, { x, y }, joined) =>
                work.draw(
                  (d) => ({
                    outline: d.outline.map((p, i): readonly [number, number] => (i === index ? [x, y] : p)),
                  }),
                  joined,
                )
              }
              onRemove={(index) => work.draw((d) => ({ outline: d.outline.filter((_, i) => i !== index) }))}
            />
            {shown.length > 0 && (
              <ul className="mt-3 text-[15px] text-rust-ink">
                {shown.slice(0, 5).map((text) => (
                  <li key={text}>{text}</li>
                ))}
              </ul>
            )}
          </Sheet>
          {mayWrite && work.dirty && (
            <div className="sticky bottom-0 z-10 grid items-end gap-3 border border-rule border-t-ink bg-sheet p-3 sm:grid-cols-[1fr_auto]">
              <Field
                label={needsReason ? roofBoard.why : roofBoard.whyIfItIs}
                value={reason}
                maxLength={500}
                error={work.error?.fault('reason')}
                onChange={(event) => setReason(event.target.value)}
              />
              <Button
                weight="primary"
                disabled={work.busy || fault !== null}
                onClick={() => work.save(reason.trim())}
              >
                {roofBoard.saveWhat(what)}
              </Button>
            </div>
          )}
        </div>
        <div className="grid min-w-0 gap-6">
          {mayWrite && mode === 'outline' && (
            <OutlinePanel outline={draft.outline} onOutline={(outline) => work.draw(() => ({ outline }))} />
          )}
          {mayWrite && mode === 'strings' && string && form && read && (
            <LayPanel
              strings={plan.strings}
              string={string}
              placed={placed}
              form={form}
              read={read}
              tried={tried}
              onString={choose}
              onForm={(next) => {
                setForm(next);
                setPlanning(true);
              }}
              onLay={lay}
            />
          )}
          {!string && (
            <Notice
              kind="empty"
              title={roofBoard.thereAreNoStrings}
              action={
                <ButtonLink href={paths.asBuiltImport(plan.site.id)}>{roofBoard.bringThemInFrom}</ButtonLink>
              }
            />
          )}
        </div>
        {string && (
          <div className="min-w-0 lg:col-span-2">
            <PlacesSheet
              key={string.id}
              string={string}
              slots={slotsOf(draft, string)}
              mayWrite={mayWrite}
              onSlots={(slots) => work.draw((d) => ({ slots: { ...d.slots, [string.id]: slots } }))}
            />
          </div>
        )}
      </div>
    </>
  );
}

/** A string of another length keeps the form's rows as far as they fit. */
const fitting = (perRow: string, slots: number): string => (Number(perRow) > slots ? String(slots) : perRow);
