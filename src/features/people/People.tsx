import { useMutation, useQuery } from '@tanstack/react-query';
import { useMemo, useState } from 'react';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Dialog } from '../../components/ui/Dialog';
import { Heading } from '../../components/ui/Heading';
import { Notice } from '../../components/ui/Notice';
import { SearchInput } from '../../components/ui/SearchInput';
import { Segmented } from '../../components/ui/Segmented';
import { Sheet } from '../../components/ui/Sheet';
import { Table, type Column } from '../../components/ui/Table';
import { Tag } from '../../components/ui/Tag';
import { RelativeTime } from '../../components/ui/Time';
import { ROLES, type Role } from '../../domain/access/permissions';
import { api, withQuery, type ApiError } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import { useViewInUrl } from '../../lib/view-in-url';
import { paths } from '../../schemas/paths';
import type { InvitationItem, PeoplePage, PeopleView, PersonItem } from '../../schemas/api/people';
import { listedPeople, PEOPLE_DEFAULTS, peopleFinding, pending } from './list';
import { PersonForm, type PersonDraft } from './PersonForm';
import { PersonTokens } from './PersonTokens';
import { peopleWords } from '../../words/people';

const KEY = ['people'];
const SHORT_ROLE: Record<Role, string> = {
  manager: 'manager',
  technician: 'technician',
  analyst: 'analyst',
  customer: 'customer',
};
const NOBODY: PersonDraft = { name: '', email: '', role: 'technician', sites: [] };

type Open =
  | { kind: 'invite'; draft: PersonDraft }
  | { kind: 'change'; person: PersonItem }
  | { kind: 'deactivate'; person: PersonItem };

interface Props {
  initial: PeoplePage;
  view: PeopleView;
  timeZone: string;
}

/** People of the organisation: who may sign in, as what, and who is on the way. */
export function People({ initial, view: initialView, timeZone }: Props) {
  const client = queryClient();
  const { data: page, error } = useQuery(
    {
      queryKey: KEY,
      queryFn: ({ signal }) => api<PeoplePage>(paths.api.people(), { signal }),
      initialData: initial,
    },
    client,
  );
  const [view, setView] = useViewInUrl(initialView, PEOPLE_DEFAULTS);
  const [open, setOpen] = useState<Open | null>(null);
  const [done, setDone] = useState('');
  const shown = useMemo(() => listedPeople(page.people, view), [page.people, view]);
  const send = useMutation<
    unknown,
    ApiError,
    { path: string; method: 'POST' | 'PATCH' | 'DELETE'; body?: unknown; said: string }
  >(
    {
      mutationFn: ({ path, method, body }) => api(path, { method, body }),
      onSuccess: (_, { said }) => {
        setOpen(null);
        setDone(said);
        void client.invalidateQueries({ queryKey: KEY });
      },
    },
    client,
  );
  const begin = (next: Open) => {
    send.reset();
    setDone('');
    setOpen(next);
  };
  const words = peopleFinding(page);

  const columns: Column<PersonItem>[] = [
    {
      key: 'name',
      label: peopleWords.name,
      sortable: true,
      cell: (p) => (
        <>
          <span className="block font-medium">
            {p.name}
            {p.self && <span className="text-ink-2">{peopleWords.you}</span>}
          </span>
          <span className="block text-sm text-ink-2 [overflow-wrap:anywhere]">
            {p.email.slice(0, p.email.lastIndexOf('@') + 1)}
            <wbr />
            {p.email.slice(p.email.lastIndexOf('@') + 1)}
          </span>
        </>
      ),
    },
    {
      key: 'role',
      label: peopleWords.role,
      cell: (p) => (
        <>
          {SHORT_ROLE[p.role]}
          {p.role === 'customer' && (
            <span className="block text-sm text-ink-2">{peopleWords.sitesCount(p.sites.length)}</span>
          )}
        </>
      ),
    },
    {
      key: 'factor',
      label: peopleWords.secondFactor,
      from: 'md',
      cell: (p) => (p.secondFactor ? 'yes' : 'no'),
    },
    {
      key: 'tokens',
      label: peopleWords.tokens,
      from: 'md',
      cell: (p) =>
        p.tokens === 0 ? (
          'none'
        ) : (
          <>
            {p.tokens}
            <span className="block text-sm text-ink-2">
              {p.tokensUsedAt ? (
                <>
                  {peopleWords.used}
                  <RelativeTime at={p.tokensUsedAt} now={page.at} timeZone={timeZone} />
                </>
              ) : (
                peopleWords.notUsedYet
              )}
            </span>
          </>
        ),
    },
    {
      key: 'seen',
      label: peopleWords.lastSeen,
      sortable: true,
      from: 'sm',
      cell: (p) =>
        !p.active ? (
          <Tag tone="slate">{peopleWords.cannotSignIn}</Tag>
        ) : p.lastSeenAt ? (
          <RelativeTime at={p.lastSeenAt} now={page.at} timeZone={timeZone} />
        ) : (
          'never'
        ),
    },
    {
      key: 'do',
      label: peopleWords.change,
      numeric: true,
      cell: (p) => (
        <span className="flex flex-wrap justify-end gap-2">
          <Button onClick={() => begin({ kind: 'change', person: p })}>{peopleWords.change}</Button>
          {!p.self && (
            <Button
              onClick={() =>
                p.active
                  ? begin({ kind: 'deactivate', person: p })
                  : send.mutate({
                      path: paths.api.person(p.id),
                      method: 'PATCH',
                      body: { active: true },
                      said: peopleWords.canSignInAgain(p.name),
                    })
              }
            >
              {p.active ? peopleWords.deactivate : peopleWords.letInAgain}
            </Button>
          )}
        </span>
      ),
    },
  ];

  return (
    <>
      <Heading
        finding={words.finding}
        sentence={words.sentence}
        actions={
          <Button weight="primary" onClick={() => begin({ kind: 'invite', draft: NOBODY })}>
            {peopleWords.inviteSomebody}
          </Button>
        }
      />
      <div role="status" className="mb-4 empty:hidden">
        {done && <Notice kind="done" title={done} />}
      </div>
      {(error ?? (!open && send.error)) && (
        <div className="mb-4">
          <Notice kind="failed" title={(error ?? send.error)?.message ?? ''} />
        </div>
      )}
      <Invitations
        page={page}
        timeZone={timeZone}
        onAgain={(i) =>
          begin({
            kind: 'invite',
            draft: { name: i.name, email: i.email, role: i.role, sites: i.sites },
          })
        }
        onEnd={(i) =>
          send.mutate({
            path: paths.api.invitation(i.id),
            method: 'DELETE',
            said: peopleWords.invitationEnded(i.name),
          })
        }
      />
      <Sheet id="people" title={peopleWords.people} flush>
        <form
          className="no-print mb-3 flex flex-wrap items-center gap-x-4 gap-y-2"
          onSubmit={(event) => event.preventDefault()}
        >
          <SearchInput
            label={peopleWords.filterPlaceholder}
            value={view.q}
            onChange={(typed) => setView({ q: typed }, 'typed')}
            className="sm:w-[240px]"
          />
          <Segmented
            label={peopleWords.role}
            options={
              [
                { value: 'all', label: peopleWords.all },
                ...ROLES.map((r) => ({ value: r, label: `${r}s` })),
              ] as const
            }
            value={view.role}
            onChange={(role) => setView({ role })}
          />
          <Segmented
            label={peopleWords.whichPeople}
            options={[
              { value: 'active', label: peopleWords.canSignIn },
              { value: 'all', label: peopleWords.everybody },
            ]}
            value={view.show}
            onChange={(show) => setView({ show })}
          />
          <ButtonLink href={withQuery(paths.api.peopleCsv(), view)} className="sm:ml-auto">
            CSV
          </ButtonLink>
        </form>
        <Table
          caption={peopleWords.peopleOfTheOrganisation}
          columns={columns}
          rows={shown}
          rowKey={(p) => p.id}
          sorting={{ key: view.sort, descending: view.sort === 'seen' }}
          onSort={({ key }) => setView({ sort: key === 'seen' ? 'seen' : 'name' })}
          empty={<Notice kind="empty" title={peopleWords.nobodyFitsTheseFilters} />}
        />
      </Sheet>

      <Dialog open={open?.kind === 'invite'} title={peopleWords.inviteSomebody} onClose={() => setOpen(null)}>
        {open?.kind === 'invite' && (
          <>
            <p className="mb-4 text-ink-2">{peopleWords.inviteHint}</p>
            <PersonForm
              draft={open.draft}
              sites={page.sites}
              fault={send.error}
              busy={send.isPending}
              submit={peopleWords.sendTheInvitation}
              onSubmit={(draft) =>
                send.mutate({
                  path: paths.api.invitations(),
                  method: 'POST',
                  body: { ...draft, sites: draft.role === 'customer' ? draft.sites : [] },
                  said: peopleWords.invitationSent(draft.email),
                })
              }
            />
          </>
        )}
      </Dialog>
      <Dialog
        open={open?.kind === 'change'}
        title={open?.kind === 'change' ? peopleWords.changePerson(open.person.name) : ''}
        onClose={() => setOpen(null)}
      >
        {open?.kind === 'change' && (
          <>
            <PersonForm
              draft={open.person}
              sites={page.sites}
              fixedEmail
              fixedRole={open.person.self}
              fault={send.error}
              busy={send.isPending}
              submit={peopleWords.save}
              onSubmit={({ name, role, sites }) =>
                send.mutate({
                  path: paths.api.person(open.person.id),
                  method: 'PATCH',
                  body: { name, role, ...(role === 'customer' ? { sites } : {}) },
                  said: peopleWords.wasChanged(name, role, open.person.role),
                })
              }
            />
            <PersonTokens
              person={open.person}
              busy={send.isPending}
              onEnd={() =>
                send.mutate({
                  path: paths.api.personTokens(open.person.id),
                  method: 'DELETE',
                  said: peopleWords.tokensEnded(open.person.name),
                })
              }
            />
          </>
        )}
      </Dialog>
      <Dialog
        open={open?.kind === 'deactivate'}
        title={open?.kind === 'deactivate' ? peopleWords.deactivatePerson(open.person.name) : ''}
        onClose={() => setOpen(null)}
      >
        {open?.kind === 'deactivate' && (
          <>
            <p>{peopleWords.isSignedOutEverywhere(open.person.name)}</p>
            {send.error && (
              <p role="alert" className="mt-3 font-medium text-rust-ink">
                {send.error.message}
              </p>
            )}
            <div className="mt-4 flex gap-2">
              <Button
                weight="primary"
                disabled={send.isPending}
                onClick={() =>
                  send.mutate({
                    path: paths.api.person(open.person.id),
                    method: 'PATCH',
                    body: { active: false },
                    said: peopleWords.canNoLongerSign(open.person.name),
                  })
                }
              >
                {peopleWords.deactivate}
              </Button>
              <Button onClick={() => setOpen(null)}>{peopleWords.leaveIt}</Button>
            </div>
          </>
        )}
      </Dialog>
    </>
  );
}

function Invitations({
  page,
  timeZone,
  onAgain,
  onEnd,
}: {
  page: PeoplePage;
  timeZone: string;
  onAgain: (invitation: InvitationItem) => void;
  onEnd: (invitation: InvitationItem) => void;
}) {
  const shown = pending(page.invitations);
  if (shown.length === 0) return null;
  return (
    <Sheet id="invitations" title={peopleWords.invited} className="mb-5">
      <ul className="divide-y divide-rule-faint">
        {shown.map((i) => (
          <li key={i.id} className="flex flex-wrap items-center justify-between gap-x-4 gap-y-2 py-2.5">
            <div className="min-w-0">
              <p className="font-medium">
                {i.name}, {SHORT_ROLE[i.role]}
              </p>
              <p className="break-all text-sm text-ink-2">
                {peopleWords.invitedAs(i.email, i.invitedBy)}
                <RelativeTime at={i.createdAt} now={page.at} timeZone={timeZone} />
              </p>
            </div>
            <span className="flex items-center gap-2">
              {i.state === 'expired' && <Tag tone="outline">{peopleWords.ranOut}</Tag>}
              <Button onClick={() => onAgain(i)}>{peopleWords.inviteAgain}</Button>
              {i.state === 'open' && <Button onClick={() => onEnd(i)}>{peopleWords.endIt}</Button>}
            </span>
          </li>
        ))}
      </ul>
    </Sheet>
  );
}
