import { useMutation } from '@tanstack/react-query';
import { useState } from 'react';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Choice } from '../../components/ui/Choice';
import { Field } from '../../components/ui/Field';
import { Heading } from '../../components/ui/Heading';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { CASE_KINDS } from '../../domain/cases/cases';
import { CASE_KIND_WORDS } from '../../words/domain-cases';
import { api, type ApiError } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import type { CaseDraft } from '../../schemas/api/cases';
import { TITLE_MAX, WHAT_MAX } from '../../schemas/lists-and-limits';
import { paths } from '../../schemas/paths';
import { PartsPicker } from './PartsPicker';
import { TextArea } from './TextArea';
import { newCase } from '../../words/new-case';

/** A new case: from a cause, from a string, or by hand. */
export function NewCase({ initial }: { initial: CaseDraft }) {
  const [draft, setDraft] = useState(initial);
  const [assignee, setAssignee] = useState('');
  const [dueOn, setDueOn] = useState('');
  // one identifier a form: a second click opens no second case
  const [ref] = useState(() => crypto.randomUUID());
  const change = (some: Partial<CaseDraft>) => setDraft((old) => ({ ...old, ...some }));
  const ofSite = useMutation<CaseDraft, ApiError, string>(
    {
      mutationFn: (site) => api<CaseDraft>(paths.api.caseDraft(), { query: { site } }),
      onSuccess: ({ strings }) => change({ strings }),
    },
    queryClient(),
  );
  const open = useMutation<{ id: string }, ApiError, void>(
    {
      mutationFn: () =>
        api(paths.api.cases(), {
          method: 'POST',
          body: {
            ref,
            site: draft.site,
            origin: draft.origin,
            title: draft.title,
            what: draft.what,
            kind: draft.kind,
            cause: draft.cause?.id ?? null,
            strings: draft.chosen,
            parts: draft.parts,
            assignee: assignee || null,
            dueOn: dueOn || null,
          },
        }),
      onSuccess: ({ id }) => window.location.assign(paths.caseFile(id)),
    },
    queryClient(),
  );
  const fault = (field: string) => open.error?.fault(field) ?? null;
  const shown = ['title', 'what', 'kind', 'site', 'strings', 'parts', 'assignee', 'dueOn'];
  const elsewhere = open.error && !shown.some((f) => fault(f));
  const siteMissing = open.error && draft.site === null ? newCase.chooseTheSite : fault('site');
  return (
    <>
      <Heading
        crumbs={[{ label: newCase.cases, href: paths.cases() }, { label: newCase.newCase }]}
        finding={draft.cause ? newCase.openCase(draft.cause.headline) : newCase.openACase}
        sentence={newCase.itKeepsTheFigures}
      />
      {draft.existing && (
        <div className="mb-5">
          <Notice
            kind="stale"
            title={newCase.caseIsOpenFor(draft.existing.number)}
            action={
              <ButtonLink href={paths.caseFile(draft.existing.id)}>
                {newCase.goToCase(draft.existing.number)}
              </ButtonLink>
            }
          >
            {draft.existing.title}
          </Notice>
        </div>
      )}
      <Sheet className="max-w-[760px]">
        <form
          className="grid gap-5"
          noValidate
          onSubmit={(event) => {
            event.preventDefault();
            open.mutate();
          }}
        >
          {elsewhere && (
            <Notice kind="failed" title={open.error?.title ?? ''}>
              {open.error?.message}
            </Notice>
          )}
          <Choice
            label={newCase.site}
            value={draft.site ?? ''}
            disabled={draft.origin !== 'hand'}
            error={siteMissing}
            options={[
              ...(draft.site === null ? [{ value: '', label: newCase.choose }] : []),
              ...draft.sites.map((s) => ({ value: s.id, label: s.name })),
            ]}
            onChange={(site) => {
              change({ site, strings: [], chosen: [], parts: [] });
              ofSite.mutate(site);
            }}
          />
          <Field
            label={newCase.title}
            value={draft.title}
            maxLength={TITLE_MAX}
            autoComplete="off"
            error={fault('title')}
            onChange={(event) => change({ title: event.target.value })}
          />
          <TextArea
            label={newCase.whatIsWrong}
            value={draft.what}
            rows={5}
            maxLength={WHAT_MAX}
            error={fault('what')}
            onChange={(what) => change({ what })}
          />
          <Choice
            label={newCase.kind}
            value={draft.kind}
            hint={newCase.itDecidesWhatThe}
            options={CASE_KINDS.map((k) => ({ value: k, label: CASE_KIND_WORDS[k] }))}
            onChange={(kind) => change({ kind: CASE_KINDS.find((k) => k === kind) ?? 'other' })}
          />
          {ofSite.error && <Notice kind="failed" title={newCase.theStringsOfThis} />}
          {draft.site !== null && !ofSite.isPending && (
            <PartsPicker
              strings={draft.strings}
              chosen={draft.chosen}
              parts={draft.parts}
              error={fault('strings') ?? fault('parts')}
              onChange={change}
            />
          )}
          <div className="grid gap-5 sm:grid-cols-2">
            <Choice
              label={newCase.assignedTo}
              value={assignee}
              error={fault('assignee')}
              options={[
                { value: '', label: newCase.nobodyYet },
                ...draft.people.map((p) => ({ value: p.id, label: p.name })),
              ]}
              onChange={setAssignee}
            />
            <Field
              label={newCase.due}
              type="date"
              value={dueOn}
              error={fault('dueOn')}
              onChange={(event) => setDueOn(event.target.value)}
            />
          </div>
          <div className="flex flex-wrap gap-2">
            <Button type="submit" weight="primary" disabled={open.isPending || open.isSuccess}>
              {newCase.openTheCase}
            </Button>
            <ButtonLink href={paths.cases()}>{newCase.leaveIt}</ButtonLink>
          </div>
        </form>
      </Sheet>
    </>
  );
}
