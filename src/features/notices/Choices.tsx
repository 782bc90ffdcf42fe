import { useMutation } from '@tanstack/react-query';
import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Choice } from '../../components/ui/Choice';
import { Field } from '../../components/ui/Field';
import { Heading } from '../../components/ui/Heading';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { HOWS, type How, type NoticeKind } from '../../domain/notices/kinds';
import { api, type ApiError } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import type { ChoiceBody, ChoicesPage } from '../../schemas/api/notices';
import { paths } from '../../schemas/paths';
import { KindRows } from './KindRows';
import { SiteChoice } from './SiteChoice';
import { clockOfMinute, minuteOfClock } from '../../words/notices-sentences';
import { choices } from '../../words/notices';

interface Draft {
  rules: Partial<Record<NoticeKind, How>>;
  sites: string[] | null;
  digestAt: string;
  quiet: boolean;
  quietFrom: string;
  quietTo: string;
  timeZone: string;
}
const OWN_ORGANISATION = '';

const draftOf = (page: ChoicesPage): Draft => ({
  rules: Object.fromEntries(page.kinds.map((k) => [k.kind, k.how])),
  sites: page.chosenSites,
  digestAt: clockOfMinute(page.digestAt),
  quiet: page.quiet !== null,
  quietFrom: clockOfMinute(page.quiet?.from ?? 22 * 60),
  quietTo: clockOfMinute(page.quiet?.to ?? 6 * 60),
  timeZone: page.timeZone ?? OWN_ORGANISATION,
});

const NO_TIME = choices.giveATimeOf;

function bodyOf(draft: Draft): { body: ChoiceBody } | { faults: Record<string, string> } {
  const digestAt = minuteOfClock(draft.digestAt);
  const from = minuteOfClock(draft.quietFrom);
  const to = minuteOfClock(draft.quietTo);
  const faults: Record<string, string> = {
    ...(digestAt === null && { digestAt: NO_TIME }),
    ...(draft.quiet && from === null && { quietFrom: NO_TIME }),
    ...(draft.quiet && to === null && { quietTo: NO_TIME }),
  };
  if (digestAt === null || (draft.quiet && (from === null || to === null))) return { faults };
  return {
    body: {
      rules: draft.rules,
      sites: draft.sites,
      digestAt,
      quiet: draft.quiet && from !== null && to !== null ? { from, to } : null,
      timeZone: draft.timeZone === OWN_ORGANISATION ? null : draft.timeZone,
    },
  };
}

function findingOf(page: ChoicesPage): string {
  const count = (how: How) => page.kinds.filter((k) => k.how === how).length;
  const atOnce = count('at_once');
  const digest = count('digest');
  if (atOnce + digest === 0) return choices.youGetNoLetters;
  const parts = [
    ...(atOnce > 0 ? [choices.ofNoticeByLetter(atOnce)] : []),
    ...(digest > 0 ? [choices.inTheDaysLetter(digest)] : []),
  ];
  return parts.join(', ');
}

/** What one is told of, how and when. */
export function Choices({ initial }: { initial: ChoicesPage }) {
  const client = queryClient();
  const [page, setPage] = useState(initial);
  const [draft, setDraft] = useState(() => draftOf(initial));
  const [faults, setFaults] = useState<Record<string, string>>({});
  const change = (some: Partial<Draft>) => setDraft({ ...draft, ...some });
  const saving = useMutation<ChoicesPage, ApiError, ChoiceBody>(
    {
      mutationFn: (body) => api<ChoicesPage>(paths.api.accountNotices(), { method: 'PUT', body }),
      onSuccess: (saved) => {
        setPage(saved);
        setDraft(draftOf(saved));
      },
    },
    client,
  );
  const save = () => {
    const made = bodyOf(draft);
    setFaults('faults' in made ? made.faults : {});
    if ('body' in made) saving.mutate(made.body);
    else saving.reset();
  };
  const daily = HOWS.some((how) => how === 'digest' && Object.values(draft.rules).includes(how));
  const fault = (field: string): string | null => faults[field] ?? saving.error?.fault(field) ?? null;
  return (
    <form
      noValidate
      onSubmit={(event) => {
        event.preventDefault();
        save();
      }}
    >
      <Heading
        crumbs={[{ label: choices.yourAccount, href: paths.account() }, { label: choices.whatYouAreTold }]}
        finding={findingOf(page)}
        sentence={choices.lettersGoToWhatever(page.email)}
      />
      <div role="status" className="mb-4 empty:hidden">
        {saving.isSuccess && <Notice kind="done" title={choices.whatYouAreToldOf} />}
      </div>
      {saving.error && (
        <div className="mb-4">
          <Notice kind="failed" title={saving.error.message} />
        </div>
      )}
      <div className="grid gap-5 lg:grid-cols-[minmax(0,3fr)_minmax(0,2fr)]">
        <Sheet id="kinds" title={choices.kinds}>
          <KindRows
            kinds={page.kinds}
            rules={draft.rules}
            onChange={(kind, how) => change({ rules: { ...draft.rules, [kind]: how } })}
          />
        </Sheet>
        <div className="grid content-start gap-5">
          <Sheet id="hours" title={choices.hours}>
            <div className="grid gap-4">
              <Field
                label={choices.theDaysLetterAt}
                type="time"
                value={draft.digestAt}
                error={fault('digestAt')}
                hint={daily ? choices.onDaysOnWhich : choices.nothingGoesIntoIt}
                onChange={(event) => change({ digestAt: event.target.value })}
              />
              <label className="flex min-h-[44px] items-center gap-2">
                <input
                  type="checkbox"
                  checked={draft.quiet}
                  onChange={(event) => change({ quiet: event.target.checked })}
                  className="h-5 w-5 accent-petrol"
                />
                {page.kinds.some((k) => k.fixed !== null)
                  ? choices.quietHoursNoLetters
                  : choices.quietHoursNoLetters2}
              </label>
              {draft.quiet && (
                <div className="grid grid-cols-2 gap-3">
                  <Field
                    label={choices.from}
                    type="time"
                    value={draft.quietFrom}
                    error={fault('quietFrom') ?? fault('quiet')}
                    onChange={(event) => change({ quietFrom: event.target.value })}
                  />
                  <Field
                    label={choices.to}
                    type="time"
                    value={draft.quietTo}
                    error={fault('quietTo')}
                    onChange={(event) => change({ quietTo: event.target.value })}
                  />
                </div>
              )}
              <Choice
                label={choices.yourTimeZone}
                value={draft.timeZone}
                error={fault('timeZone')}
                options={[
                  {
                    value: OWN_ORGANISATION,
                    label: choices.asTheOrganisation(page.organisationZone.replaceAll('_', ' ')),
                  },
                  ...page.timeZones.map((zone) => ({ value: zone, label: zone.replaceAll('_', ' ') })),
                ]}
                onChange={(timeZone) => change({ timeZone })}
              />
            </div>
          </Sheet>
          {page.sites.length > 1 && (
            <Sheet id="sites" title={choices.sites}>
              <SiteChoice
                sites={page.sites}
                chosen={draft.sites}
                error={fault('sites')}
                hasHazards={page.kinds.some((k) => k.fixed !== null)}
                onChange={(sites) => change({ sites })}
              />
            </Sheet>
          )}
        </div>
      </div>
      <div className="mt-5">
        <Button type="submit" weight="primary" disabled={saving.isPending}>
          {choices.saveWhatYouAre}
        </Button>
      </div>
    </form>
  );
}
