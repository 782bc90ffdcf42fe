import { useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import type { SavedList } from '../../domain/saved-views/lists';
import { api, ApiError } from '../../lib/api';
import type { NewSavedView, SavedView } from '../../schemas/api/saved-views';
import { paths } from '../../schemas/paths';
import { Button } from '../ui/Button';
import { Dialog } from '../ui/Dialog';
import { Field } from '../ui/Field';
import { NotRead } from '../ui/NotRead';
import { Notice } from '../ui/Notice';
import { savedViewsWords } from '../../words/saved-views';

interface Props {
  list: SavedList;
  /** Of the list's page. */
  path: string;
  /** What the address says now, without its question mark. */
  query: string;
  /** As the server read them. */
  initial: readonly SavedView[];
}

const keyOf = (list: SavedList) => ['saved-views', list] as const;

function SaveForm({ list, query, onDone }: Pick<Props, 'list' | 'query'> & { onDone: () => void }) {
  const client = useQueryClient();
  const [name, setName] = useState('');
  const [shared, setShared] = useState(false);
  const save = useMutation({
    mutationFn: (view: NewSavedView) =>
      api<SavedView>(paths.api.savedViews(), { method: 'POST', body: view }),
    onSuccess: async () => {
      await client.invalidateQueries({ queryKey: keyOf(list) });
      onDone();
    },
  });
  const error = save.error instanceof ApiError ? save.error : null;
  const submit = (event: { preventDefault(): void }) => {
    event.preventDefault();
    save.mutate({ list, name, query, shared });
  };
  return (
    <form onSubmit={submit} noValidate className="grid gap-3">
      <Field
        label={savedViewsWords.nameOfTheView}
        value={name}
        maxLength={80}
        onChange={(event) => setName(event.target.value)}
        error={error?.fault('name')}
      />
      <label className="target inline-flex items-center gap-2">
        <input
          type="checkbox"
          checked={shared}
          onChange={(event) => setShared(event.target.checked)}
          className="h-5 w-5 accent-[var(--ink)]"
        />
        {savedViewsWords.shareItWithEverybody}
      </label>
      {error && error.fields.length === 0 && (
        <Notice kind="failed" title={savedViewsWords.theViewWasNot}>
          {error.message}
        </Notice>
      )}
      <div>
        <Button type="submit" weight="primary" disabled={save.isPending}>
          {save.isPending ? savedViewsWords.saving : savedViewsWords.saveTheView}
        </Button>
      </div>
    </form>
  );
}

/** Views of a list: the person's own and shared ones, as links; the present filters under a new name. */
export function SavedViews({ list, path, query, initial }: Props) {
  const client = useQueryClient();
  const [saving, setSaving] = useState(false);
  const views = useQuery({
    queryKey: keyOf(list),
    queryFn: ({ signal }) => api<SavedView[]>(paths.api.savedViews(), { query: { list }, signal }),
    initialData: [...initial],
    staleTime: 60_000,
  });
  const drop = useMutation({
    mutationFn: (view: SavedView) => api(paths.api.savedView(view.id), { method: 'DELETE' }),
    onSuccess: () => client.invalidateQueries({ queryKey: keyOf(list) }),
  });
  const share = useMutation({
    mutationFn: (view: SavedView) =>
      api(paths.api.savedView(view.id), { method: 'PATCH', body: { shared: !view.shared } }),
    onSuccess: () => client.invalidateQueries({ queryKey: keyOf(list) }),
  });
  return (
    <div className="no-print">
      <div className="flex flex-wrap items-center gap-2">
        {views.data.map((view) => {
          const here = view.query === query;
          return (
            <span
              key={view.id}
              className={`inline-flex items-center rounded border ${here ? 'border-ink' : 'border-rule'}`}
            >
              <a
                href={view.query ? `${path}?${view.query}` : path}
                aria-current={here ? 'page' : undefined}
                className={`target inline-flex items-center px-3 text-[15px] text-ink no-underline hover:text-petrol ${here ? 'font-semibold' : ''}`}
              >
                {view.name}
                {view.shared && (
                  <span className="ml-1.5 text-sm font-normal text-ink-2">
                    {view.own ? savedViewsWords.shared : savedViewsWords.by(view.by)}
                  </span>
                )}
              </a>
              {view.own && (
                <>
                  <button
                    type="button"
                    className="target px-1.5 text-sm text-ink-2 hover:text-ink"
                    aria-label={
                      view.shared
                        ? savedViewsWords.unshareView(view.name)
                        : savedViewsWords.shareView(view.name)
                    }
                    title={
                      view.shared ? savedViewsWords.keepToMyself : savedViewsWords.shareWithTheOrganisation
                    }
                    disabled={share.isPending}
                    onClick={() => share.mutate(view)}
                  >
                    {view.shared ? savedViewsWords.unshare : savedViewsWords.share}
                  </button>
                  <button
                    type="button"
                    className="target min-w-[36px] px-2 text-lg leading-none text-ink-2 hover:text-ink"
                    aria-label={savedViewsWords.removeTheView(view.name)}
                    disabled={drop.isPending}
                    onClick={() => drop.mutate(view)}
                  >
                    ×
                  </button>
                </>
              )}
            </span>
          );
        })}
        <Button className="!px-3" onClick={() => setSaving(true)}>
          {savedViewsWords.saveThisView}
        </Button>
      </div>
      <NotRead
        error={drop.error ?? share.error}
        title={savedViewsWords.theViewStandsAs}
        kind="failed"
        className="mt-2"
      />
      <Dialog open={saving} title={savedViewsWords.saveThisView} onClose={() => setSaving(false)}>
        <SaveForm list={list} query={query} onDone={() => setSaving(false)} />
      </Dialog>
    </div>
  );
}
