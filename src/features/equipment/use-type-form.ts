import { useDeferredValue, useEffect, useMemo, useState } from 'react';
import { FIELDS } from '../../domain/equipment/plausibility';
import type { EquipmentFamily } from '../../domain/equipment/families';
import type { Field } from '../../domain/equipment/fields';
import { ApiError, api } from '../../lib/api';
import type { CatalogueItem, CatalogueType, EntrySaved } from '../../schemas/api/equipment';
import { paths } from '../../schemas/paths';
import { typedEntry } from '../../schemas/equipment-entry';
import { emptyForm, formOf, readForm, withField, type FormState } from './form';

export type Saving =
  | { step: 'editing' }
  | { step: 'saving' }
  | { step: 'saved' }
  | { step: 'failed'; message: string }
  /** Somebody else saved first; `theirs` is what now stands. */
  | { step: 'overtaken'; message: string; theirs: CatalogueItem };

/** State of the form of one type: what is typed, what is wrong, saving it and losing nothing on the way. */
export function useTypeForm(family: EquipmentFamily, start: CatalogueItem | null) {
  const [item, setItem] = useState(start);
  const [state, setState] = useState<FormState>(() =>
    start ? formOf(family, start.entry) : emptyForm(family),
  );
  const [kept, setKept] = useState(state.typed);
  const [saving, setSaving] = useState<Saving>({ step: 'editing' });
  const [served, setServed] = useState<Readonly<Record<string, string>>>({});
  const reading = useMemo(() => readForm(family, state.typed), [family, state.typed]);
  const deferred = useDeferredValue(reading);
  const dirty = FIELDS[family].some((f) => (state.typed[f.key] ?? '') !== (kept[f.key] ?? ''));
  const open = reading.doubts.filter((d) => !state.accepted.includes(d.key));

  useEffect(() => {
    if (!dirty) return;
    const ask = (event: BeforeUnloadEvent) => event.preventDefault();
    window.addEventListener('beforeunload', ask);
    return () => window.removeEventListener('beforeunload', ask);
  }, [dirty]);

  const setField = (field: Field, value: string) => {
    setState((old) => withField(family, old, field, value, item === null));
    setServed({});
    if (saving.step === 'saved' || saving.step === 'failed') setSaving({ step: 'editing' });
  };
  const leave = (field: Field) =>
    setState((old) => ({ ...old, touched: { ...old.touched, [field.key]: true } }));
  const accept = (key: string, accepted: boolean) =>
    setState((old) => ({
      ...old,
      accepted: accepted ? [...old.accepted, key] : old.accepted.filter((k) => k !== key),
    }));
  const errorOf = (field: Field): string | null =>
    served[field.key] ?? (state.touched[field.key] ? (reading.faults[field.key] ?? null) : null);

  const write = (version: string | undefined) =>
    item
      ? api<EntrySaved>(paths.api.equipmentType(family, item.id), {
          method: 'PUT',
          body: { typed: state.typed, accepted: state.accepted, version: version ?? item.version },
        })
      : api<EntrySaved>(paths.api.equipment(family), {
          method: 'POST',
          body: { typed: state.typed, accepted: state.accepted },
        });

  /** Saves what is typed; over `version` where somebody else was faster and that was looked at. */
  const save = async (version?: string): Promise<boolean> => {
    setState((old) => ({ ...old, touched: Object.fromEntries(FIELDS[family].map((f) => [f.key, true])) }));
    if (!reading.entry || open.length > 0) return false;
    setSaving({ step: 'saving' });
    try {
      const { id } = await write(version);
      const { item: now } = await api<CatalogueType>(paths.api.equipmentType(family, id));
      if (!item) window.history.replaceState(window.history.state, '', paths.equipmentType(family, id));
      const fresh = formOf(family, now.entry);
      setItem(now);
      setState({ ...fresh, accepted: state.accepted });
      setKept(fresh.typed);
      setSaving({ step: 'saved' });
      return true;
    } catch (error) {
      if (!(error instanceof ApiError)) throw error;
      setServed(
        error.status === 422 ? Object.fromEntries(error.fields.map((f) => [f.field, f.message])) : {},
      );
      if (error.status === 409 && item) await overtaken(error, item.id);
      else setSaving({ step: 'failed', message: error.message });
      return false;
    }
  };
  const overtaken = async (error: ApiError, id: string) => {
    try {
      const { item: theirs } = await api<CatalogueType>(paths.api.equipmentType(family, id));
      setSaving({ step: 'overtaken', message: error.message, theirs });
    } catch (second) {
      if (!(second instanceof ApiError)) throw second;
      setSaving({ step: 'failed', message: `${error.message} ${second.message}` });
    }
  };
  const takeTheirs = (theirs: CatalogueItem) => {
    const fresh = formOf(family, theirs.entry);
    setItem(theirs);
    setState(fresh);
    setKept(fresh.typed);
    setSaving({ step: 'editing' });
  };
  const setArchived = async (archived: boolean) => {
    if (!item) return;
    setSaving({ step: 'saving' });
    try {
      const { item: now } = await api<CatalogueType>(paths.api.equipmentType(family, item.id), {
        method: 'PATCH',
        body: { archived },
      });
      setItem(now);
      setSaving({ step: 'editing' });
    } catch (error) {
      if (!(error instanceof ApiError)) throw error;
      setSaving({ step: 'failed', message: error.message });
    }
  };
  const theirs = saving.step === 'overtaken' ? typedEntry(family, saving.theirs.entry) : null;

  return {
    item,
    state,
    reading,
    /** As `reading`, a moment behind while typing: for what takes long to draw. */
    deferred,
    dirty,
    open,
    saving,
    theirsOf: (field: Field): string | null => {
      const value = theirs?.[field.key] ?? '';
      return theirs && value !== (state.typed[field.key] ?? '').trim() ? value : null;
    },
    setField,
    leave,
    accept,
    errorOf,
    save,
    takeTheirs,
    setArchived,
  };
}
