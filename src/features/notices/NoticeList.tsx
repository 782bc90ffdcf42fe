import type { KeyboardEvent } from 'react';
import { Button } from '../../components/ui/Button';
import { Tag } from '../../components/ui/Tag';
import { SiteTime } from '../../components/ui/Time';
import { KINDS } from '../../domain/notices/kinds';
import type { NoticeItem } from '../../schemas/api/notices';
import { noticeList } from '../../words/notices';

interface Props {
  items: readonly NoticeItem[];
  at: string;
  timeZone: string;
  onOpen: (item: NoticeItem) => void;
  onMark: (item: NoticeItem, read: boolean) => void;
}

/** Arrow keys go from notice to notice, m marks the one in focus. */
function byKey(event: KeyboardEvent<HTMLOListElement>): void {
  const links = [...event.currentTarget.querySelectorAll<HTMLElement>('a[data-notice]')];
  const entry = event.target instanceof HTMLElement ? event.target.closest('li') : null;
  if (event.key === 'm' && !event.metaKey && !event.ctrlKey) {
    entry?.querySelector<HTMLElement>('button[data-mark]')?.click();
    return;
  }
  const index = links.findIndex((link) => entry?.contains(link));
  const to = { ArrowDown: index + 1, ArrowUp: index - 1, Home: 0, End: links.length - 1 }[event.key];
  if (to === undefined) return;
  event.preventDefault();
  links[Math.max(0, Math.min(links.length - 1, to))]?.focus();
}

const times = (n: number): string => (n === 1 ? 'once' : noticeList.nTimes(n));

export function NoticeList({ items, at, timeZone, onOpen, onMark }: Props) {
  return (
    <ol className="divide-y divide-rule-faint" onKeyDown={byKey} aria-label={noticeList.noticesNewestFirst}>
      {items.map((item) => {
        const unread = item.readAt === null;
        return (
          <li key={item.id} className="flex items-start gap-x-3 py-3 sm:gap-x-4" data-unread={unread}>
            <span
              aria-hidden="true"
              className={`mt-1.5 h-2.5 w-2.5 shrink-0 ${unread ? (item.hazard && !item.overAt ? 'rotate-45 bg-crimson' : 'bg-ink') : 'border border-rule'}`}
            />
            <div className="min-w-0 flex-1">
              <p className={`text-[15px] leading-5 ${unread ? 'font-semibold' : ''}`}>
                <a
                  href={item.href}
                  data-notice
                  onClick={() => onOpen(item)}
                  className="-my-1 inline-block py-1 hover:underline"
                >
                  {unread && <span className="sr-only">{noticeList.unread}</span>}
                  {item.headline}
                </a>
              </p>
              {item.body && <p className="mt-0.5 text-ink-2">{item.body}</p>}
              <p className="mt-1 flex flex-wrap items-center gap-x-2 gap-y-1 text-sm text-ink-2">
                {item.hazard && !item.overAt ? (
                  <Tag tone="crimson" shape="◆">
                    {KINDS[item.kind].name}
                  </Tag>
                ) : (
                  <span>{KINDS[item.kind].name}</span>
                )}
                {item.site && <span>{item.site.name}</span>}
                <SiteTime at={item.at} now={at} timeZone={timeZone} />
                {item.came > 0 && <span>{noticeList.wentAndCameBack(times(item.came))}</span>}
                {item.overAt && <Tag tone="petrol">{noticeList.over}</Tag>}
              </p>
            </div>
            <Button
              data-mark
              aria-label={noticeList.unreadItem(unread, item.headline)}
              onClick={() => onMark(item, unread)}
              className="no-print shrink-0 px-2.5 text-sm sm:px-4"
            >
              <span className="sm:hidden">{unread ? noticeList.read : noticeList.unread2}</span>
              <span className="hidden sm:inline">
                {unread ? noticeList.markAsRead : noticeList.markAsUnread}
              </span>
            </Button>
          </li>
        );
      })}
    </ol>
  );
}
