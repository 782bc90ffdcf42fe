import { Button, ButtonLink } from '../../components/ui/Button';
import { Choice } from '../../components/ui/Choice';
import { Notice } from '../../components/ui/Notice';
import { SearchInput } from '../../components/ui/SearchInput';
import { Sheet } from '../../components/ui/Sheet';
import { SiteTime } from '../../components/ui/Time';
import { withQuery } from '../../lib/api';
import { AUDIT_AREAS, type AuditItem, type AuditPage, type AuditView } from '../../schemas/api/audit';
import { paths } from '../../schemas/paths';
import { actionWords, AREA_WORDS, changesOf, subjectWords } from '../../words/audit-sentences';
import { auditList } from '../../words/audit';

/** The fields of an entry that are seen at once. */
const SHOWN_CHANGES = 4;

function Changes({ changes }: { changes: ReturnType<typeof changesOf> }) {
  return (
    <dl>
      {changes.map((c) => (
        <div key={c.field} className="flex flex-wrap gap-x-2">
          <dt className="text-ink-2">{c.field}</dt>
          <dd
            className="line-clamp-3 min-w-0 break-words [overflow-wrap:anywhere]"
            title={c.after ?? undefined}
          >
            {c.before !== null && (
              <>
                <del className="text-ink-2">{c.before}</del>{' '}
              </>
            )}
            {c.after !== null && <ins className="no-underline">{c.after}</ins>}
          </dd>
        </div>
      ))}
    </dl>
  );
}

function Entry({ item, at, timeZone }: { item: AuditItem; at: string; timeZone: string }) {
  const changes = changesOf(item);
  const subject = subjectWords(item.subject);
  return (
    <li className="grid gap-x-6 gap-y-1 py-3 lg:grid-cols-[170px_minmax(0,1fr)_minmax(0,1.2fr)]">
      <p className="text-sm text-ink-2">
        <SiteTime at={item.at} now={at} timeZone={timeZone} zone />
        {item.address && <span className="block">{auditList.fromAddress(item.address)}</span>}
      </p>
      <div className="min-w-0">
        <p>
          <span className="font-medium">{item.person ?? 'Wakeline'}</span> {actionWords(item.action)}
        </p>
        <p className="break-words text-sm text-ink-2">
          {item.site && (
            <a href={paths.site(item.site.id)} className="text-petrol hover:underline">
              {item.site.name}
            </a>
          )}
          {item.site && subject && ' · '}
          {subject}
        </p>
        {item.reason && <p className="mt-1 break-words">{item.reason}</p>}
      </div>
      {changes.length > 0 && (
        <div className="min-w-0 text-sm">
          <Changes changes={changes.slice(0, SHOWN_CHANGES)} />
          {changes.length > SHOWN_CHANGES && (
            <details>
              <summary className="target flex cursor-pointer items-center text-ink-2">
                {auditList.moreFields(changes.length, SHOWN_CHANGES)}
              </summary>
              <Changes changes={changes.slice(SHOWN_CHANGES)} />
            </details>
          )}
        </div>
      )}
    </li>
  );
}

/** Who did what, newest first; a plain form filters it by the address. */
export function AuditList({ page, view, timeZone }: { page: AuditPage; view: AuditView; timeZone: string }) {
  const filters = { q: view.q, area: view.area === 'all' ? '' : view.area };
  return (
    <>
      <form action={paths.audit()} className="no-print mb-4 flex flex-wrap items-center gap-x-3 gap-y-2">
        <SearchInput
          name="q"
          label={auditList.findLabel}
          placeholder={auditList.findPlaceholder}
          defaultValue={view.q}
          className="sm:w-[280px]"
        />
        <Choice
          inline
          label={auditList.about}
          name="area"
          defaultValue={view.area}
          options={[
            { value: 'all', label: auditList.everything },
            ...AUDIT_AREAS.map((area) => ({ value: area, label: AREA_WORDS[area] })),
          ]}
        />
        <Button type="submit">{auditList.find}</Button>
        <ButtonLink href={withQuery(paths.api.auditCsv(), filters)} className="sm:ml-auto">
          CSV
        </ButtonLink>
      </form>
      {page.items.length === 0 ? (
        <Notice
          kind="empty"
          title={view.q || view.area !== 'all' ? auditList.nothingFits : auditList.nothingYet}
        >
          {view.q || view.area !== 'all' ? auditList.nothingFitsHint : ''}
        </Notice>
      ) : (
        <Sheet id="entries" title={auditList.onRecord}>
          <ul className="divide-y divide-rule-faint">
            {page.items.map((item) => (
              <Entry key={item.id} item={item} at={page.at} timeZone={timeZone} />
            ))}
          </ul>
          {page.next !== null && (
            <ButtonLink href={withQuery(paths.audit(), { ...filters, before: page.next })} className="mt-3">
              {auditList.older}
            </ButtonLink>
          )}
        </Sheet>
      )}
    </>
  );
}
