import { useState } from 'react';
import { useLive } from '../../lib/live-hook';
import type { NoticesNow } from '../../schemas/live';
import { paths } from '../../schemas/paths';
import { noticeCount } from '../../words/shell';

interface Props {
  unread: number;
  hazards: number;
}

const MOST = 100;

/** The way to one's notices, with how many are unread; counts while one looks. A hazard that comes stands over the page. */
export function NoticeCount({ unread, hazards }: Props) {
  const [now, setNow] = useState<Pick<NoticesNow, 'unread' | 'hazards'>>({ unread, hazards });
  const [came, setCame] = useState<NoticesNow['newest']>(null);
  const [shown, setShown] = useState<string | null>(null);
  const [known, setKnown] = useState<string | null>(null);
  useLive('notices', ({ notices }, kind) => {
    if (!notices) return;
    const { newest } = notices;
    setNow(notices);
    const isNew = newest !== null && newest.id !== known && kind === 'delta' && notices.unread > now.unread;
    setKnown(newest?.id ?? null);
    if (!isNew) return;
    setCame(newest);
    if (newest.hazard) setShown(newest.id);
  });
  const count = now.unread >= MOST ? '99+' : String(now.unread);
  const where = came?.siteName ? `${came.siteName}: ` : '';
  return (
    <>
      <a
        href={paths.notices()}
        data-unread={now.unread}
        className="flex min-h-[44px] min-w-[44px] items-center justify-center gap-1.5 text-[15px] text-ink-2 hover:text-ink"
      >
        <svg width="18" height="18" viewBox="0 0 18 18" aria-hidden="true" className="xl:hidden">
          <path
            d="M2 3.5h14v9.5H9.5L6 16v-3H2z"
            fill="none"
            stroke="currentColor"
            strokeWidth="1.6"
            strokeLinejoin="round"
          />
          <path d="M5 7h8M5 9.8h5" stroke="currentColor" strokeWidth="1.4" />
        </svg>
        <span className="sr-only xl:not-sr-only">{noticeCount.notices}</span>
        {now.unread > 0 && (
          <span
            className={`min-w-[20px] rounded-sm px-1 text-center text-xs font-semibold leading-5 ${now.hazards > 0 ? 'bg-crimson text-on-crimson' : 'bg-ink text-sheet'}`}
          >
            {count}
          </span>
        )}
        <span className="sr-only">{now.unread > 0 ? noticeCount.unread : noticeCount.allRead}</span>
      </a>
      <p role="status" className="sr-only">
        {came ? noticeCount.newNotice(where, came.headline) : ''}
      </p>
      {came && shown === came.id && (
        <aside
          aria-label={noticeCount.notShuttingDown}
          className="fixed inset-x-3 bottom-3 z-50 border border-t-2 border-rule border-t-crimson bg-sheet p-4 sm:left-auto sm:w-[380px]"
        >
          <p className="text-sm font-semibold text-crimson">
            <span aria-hidden="true">◆</span>
            {noticeCount.notShuttingDown2}
          </p>
          <p className="mt-1 font-medium">
            {where}
            {came.headline}
          </p>
          <div className="mt-2 flex gap-4">
            <a href={came.href} className="target inline-flex items-center font-medium text-petrol underline">
              {noticeCount.seeWhatToTreat}
            </a>
            <button type="button" className="target text-ink-2 hover:text-ink" onClick={() => setShown(null)}>
              {noticeCount.notNow}
            </button>
          </div>
        </aside>
      )}
    </>
  );
}
