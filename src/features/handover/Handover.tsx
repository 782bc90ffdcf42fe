import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { STEP_NAMES } from '../../components/commissioning/Steps';
import { StepsBeside } from '../../components/commissioning/StepsBeside';
import { Button, ButtonLink } from '../../components/ui/Button';
import { Heading } from '../../components/ui/Heading';
import { NotRead } from '../../components/ui/NotRead';
import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import { SiteTime } from '../../components/ui/Time';
import { openGaps } from '../../domain/commissioning/steps';
import { listed } from '../../drawings/numbers';
import { api, ApiError } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import { paths } from '../../schemas/paths';
import type { HandoverPage, PackItem } from '../../schemas/api/handover';
import { handoverWords } from '../../words/handover';

interface Props {
  initial: HandoverPage;
  mayMake: boolean;
}

export function handoverFinding({ site, packs }: HandoverPage): { finding: string; sentence: string } {
  const open = openGaps(site.steps);
  const [newest] = packs;
  if (open.length > 0)
    return {
      finding: handoverWords.theHandoverOf(open.length, site.name),
      sentence: handoverWords.settleEachWhereIt,
    };
  if (newest)
    return {
      finding: handoverWords.wasHandedOverWith(site.name, newest.version),
      sentence: handoverWords.aLaterChangeMakes,
    };
  return {
    finding: handoverWords.canBeHandedOver(site.name),
    sentence: handoverWords.everythingBeforeItIs,
  };
}

const size = (bytes: number): string =>
  bytes < 1e6 ? handoverWords.maxKb(Math.max(1, bytes / 1000)) : handoverWords.bytesMb(bytes);

function Pack({ pack, page }: { pack: PackItem; page: HandoverPage }) {
  return (
    <li className="grid gap-x-6 gap-y-2 border-b border-rule-faint py-3 last:border-b-0 sm:grid-cols-[minmax(0,1fr)_auto]">
      <div className="min-w-0">
        <p className="font-semibold">{handoverWords.version(pack.version)}</p>
        <p className="text-sm text-ink-2">
          {pack.madeBy}, <SiteTime at={pack.madeAt} now={page.at} timeZone={page.site.timeZone} zone />
          {pack.openPoints > 0 && handoverWords.openPoints(pack.openPoints)}
        </p>
        {pack.remark && <p className="mt-1">{pack.remark}</p>}
        <p className="mt-1 break-all text-sm text-ink-2">{handoverWords.fingerprint(pack.fingerprint)}</p>
      </div>
      <div className="flex flex-wrap content-start gap-2">
        <ButtonLink href={`${paths.api.paper(pack.ref)}?form=pdf`}>
          {handoverWords.pdfSize(size(pack.pdfBytes))}
        </ButtonLink>
        <ButtonLink href={`${paths.api.paper(pack.ref)}?form=csv`}>
          {handoverWords.asBuiltCsv(size(pack.csvBytes))}
        </ButtonLink>
      </div>
    </li>
  );
}

function MakePanel({ page, onMade }: { page: HandoverPage; onMade: () => void }) {
  const [remark, setRemark] = useState('');
  const [tell, setTell] = useState(page.customers.length > 0);
  const [busy, setBusy] = useState(false);
  const [fault, setFault] = useState<ApiError | null>(null);
  const make = async () => {
    setBusy(true);
    setFault(null);
    try {
      await api(paths.api.handover(page.site.id), { method: 'POST', body: { remark, tellCustomers: tell } });
      setRemark('');
      onMade();
    } catch (error) {
      if (!(error instanceof ApiError)) throw error;
      setFault(error);
    } finally {
      setBusy(false);
    }
  };
  const again = page.packs.length > 0;
  return (
    <Sheet id="make" title={again ? handoverWords.makeANewVersion : handoverWords.makeThePack}>
      <form
        onSubmit={(event) => {
          event.preventDefault();
          void make();
        }}
      >
        <label htmlFor="remark" className="mb-1 block font-medium">
          {handoverWords.remark}
        </label>
        <textarea
          id="remark"
          rows={3}
          value={remark}
          onChange={(event) => setRemark(event.target.value)}
          placeholder={again ? handoverWords.whatHasChangedSince : ''}
          className="w-full rounded border border-rule bg-sheet px-3 py-2 text-[16px] placeholder:text-ink-3"
        />
        {page.customers.length > 0 ? (
          <label className="target mt-2 flex items-center gap-2.5">
            <input
              type="checkbox"
              checked={tell}
              onChange={(event) => setTell(event.target.checked)}
              className="h-5 w-5 accent-[var(--petrol)]"
            />
            {handoverWords.sendLetterWithThe(listed(page.customers))}
          </label>
        ) : (
          <p className="mt-2 text-sm text-ink-2">{handoverWords.noCustomerCanSee}</p>
        )}
        {fault && (
          <div className="mt-3">
            <Notice kind="failed" title={fault.message}>
              {fault.fields.length > 0 && (
                <ul>
                  {fault.fields.map((f) => (
                    <li key={f.field}>{f.message}</li>
                  ))}
                </ul>
              )}
            </Notice>
          </div>
        )}
        <Button type="submit" weight="primary" disabled={busy} className="mt-3">
          {busy
            ? handoverWords.makingThePapers
            : again
              ? handoverWords.makeANewVersion
              : handoverWords.handTheSiteOver}
        </Button>
        {!again && <p className="mt-2 text-sm text-ink-2">{handoverWords.theSiteBecomesAn}</p>}
      </form>
    </Sheet>
  );
}

/** Up to so many points are all seen at once. */
const FEW_POINTS = 24;

/** What is open of one step; a long list is one tap away. */
function StepPoints({ step, few }: { step: HandoverPage['site']['steps'][number]; few: boolean }) {
  const open = openGaps([step]);
  if (open.length === 0) return null;
  return (
    <details open={few || open.length <= 3}>
      <summary className="target cursor-pointer py-2 font-medium">
        {STEP_NAMES[step.key]}{' '}
        <span className="ml-1 font-normal text-ink-2">{handoverWords.countedOpenPoint(open.length)}</span>
      </summary>
      <ul className="divide-y divide-rule-faint pl-4">
        {open.map((gap) => (
          <li key={gap.key} className="py-2">
            {gap.words}
          </li>
        ))}
      </ul>
    </details>
  );
}

/** The handover of a site: what blocks it, its papers version by version, and the making of the next. */
export function Handover({ initial, mayMake }: Props) {
  const client = queryClient();
  const key = ['handover', initial.site.id];
  const { data: page, error } = useQuery(
    {
      queryKey: key,
      queryFn: ({ signal }) => api<HandoverPage>(paths.api.handover(initial.site.id), { signal }),
      initialData: initial,
    },
    client,
  );
  const words = handoverFinding(page);
  const open = openGaps(page.site.steps);
  return (
    <>
      <Heading
        crumbs={[
          { label: handoverWords.commissioning, href: paths.commissioning() },
          { label: page.site.name, href: paths.commissioningSite(page.site.id) },
          { label: handoverWords.handover },
        ]}
        finding={words.finding}
        sentence={words.sentence}
      />
      <NotRead error={error} title={handoverWords.theHandoverCouldNot} className="mb-4" />
      <div className="grid gap-5 lg:grid-cols-[minmax(0,1fr)_340px] xl:grid-cols-[200px_minmax(0,1fr)_340px]">
        <div className="lg:col-span-2 xl:col-span-1">
          <StepsBeside site={page.site.id} steps={page.site.steps} here="handover" />
        </div>
        <div className="grid min-w-0 content-start gap-5">
          {open.length > 0 && (
            <Sheet
              id="blocks"
              title={handoverWords.whatBlocksIt}
              aside={
                <a
                  href={paths.commissioningSite(page.site.id)}
                  className="target inline-flex items-center text-petrol hover:underline"
                >
                  {handoverWords.settleOrAccept}
                </a>
              }
            >
              <div className="grid gap-3">
                {page.site.steps.map((step) => (
                  <StepPoints key={step.key} step={step} few={open.length <= FEW_POINTS} />
                ))}
              </div>
            </Sheet>
          )}
          <Sheet
            id="packs"
            title={handoverWords.papers}
            aside={page.packs.length > 0 && handoverWords.countedPacksVersion(page.packs.length)}
          >
            {page.packs.length === 0 ? (
              <Notice kind="empty" title={handoverWords.noPackHasBeen} />
            ) : (
              <ul>
                {page.packs.map((pack) => (
                  <Pack key={pack.ref} pack={pack} page={page} />
                ))}
              </ul>
            )}
          </Sheet>
        </div>
        <div className="grid content-start gap-5">
          {mayMake && open.length === 0 && (
            <MakePanel page={page} onMade={() => void client.invalidateQueries({ queryKey: key })} />
          )}
          <Sheet id="inside" title={handoverWords.whatAPackHolds}>
            <p className="text-ink-2">{handoverWords.systemDataPeopleSingle}</p>
          </Sheet>
        </div>
      </div>
    </>
  );
}
