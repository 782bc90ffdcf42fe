import { useCallback, useEffect, useState } from 'react';
import { api, ApiError } from '../../lib/api';
import type { RoofPlan } from '../../schemas/api/roof';
import { paths } from '../../schemas/paths';
import {
  begin,
  change,
  changedStrings,
  draftOf,
  outlineChanged,
  redo,
  saveOf,
  undo,
  type Draft,
  type Drawing,
} from './draft';
import { roofUseRoof } from '../../words/roof';

/** What the server answered, checked. Schemas are heavy: they come with the first saving. */
const readPlan = async (answer: unknown): Promise<RoofPlan> =>
  (await import('../../schemas/api/roof')).roofPlan.parse(answer);

/** A roof that is being drawn, and its keeping. */
export function useRoof(initial: RoofPlan) {
  const [plan, setPlan] = useState(initial);
  const [drawing, setDrawing] = useState<Drawing>(() => begin(draftOf(initial)));
  const [busy, setBusy] = useState(false);
  const [error, setError] = useState<ApiError | null>(null);
  const [saved, setSaved] = useState(false);
  const draft = drawing.now;
  const strings = changedStrings(plan, draft);
  const outline = outlineChanged(plan, draft);
  const dirty = strings.length > 0 || outline;

  useEffect(() => {
    if (!dirty) return;
    const ask = (event: BeforeUnloadEvent) => event.preventDefault();
    window.addEventListener('beforeunload', ask);
    return () => window.removeEventListener('beforeunload', ask);
  }, [dirty]);

  const draw = useCallback((some: (draft: Draft) => Partial<Draft>, joined = false) => {
    setSaved(false);
    setDrawing((d) => change(d, some(d.now), joined));
  }, []);
  const fail = (fault: unknown) =>
    setError(
      fault instanceof ApiError
        ? fault
        : new ApiError(0, roofUseRoof.notSaved, fault instanceof Error ? fault.message : String(fault)),
    );
  const save = async (reason: string) => {
    setBusy(true);
    setError(null);
    try {
      const kept = await readPlan(
        await api<unknown>(paths.api.roof(plan.site.id), {
          method: 'PUT',
          body: saveOf(plan, draft, reason),
        }),
      );
      setPlan(kept);
      setDrawing(begin(draftOf(kept)));
      setSaved(true);
    } catch (fault) {
      fail(fault);
    } finally {
      setBusy(false);
    }
  };
  /** Looks at what is there now. `mine`: what is drawn here stays, and is saved over it next time. */
  const reload = async (mine: boolean) => {
    setBusy(true);
    try {
      const now = await readPlan(await api<unknown>(paths.api.roof(plan.site.id)));
      const own = Object.fromEntries(strings.map((s) => [s.id, draft.slots[s.id] ?? s.slots]));
      setPlan(now);
      setDrawing(begin(mine ? { outline: outline ? draft.outline : now.outline, slots: own } : draftOf(now)));
      setError(null);
    } catch (fault) {
      fail(fault);
    } finally {
      setBusy(false);
    }
  };
  return {
    plan,
    draft,
    draw,
    changed: { strings, outline },
    dirty,
    busy,
    error,
    saved,
    canUndo: drawing.past.length > 0,
    canRedo: drawing.future.length > 0,
    undo: () => setDrawing(undo),
    redo: () => setDrawing(redo),
    save: (reason: string) => void save(reason),
    reload: (mine: boolean) => void reload(mine),
  };
}
