import { counted } from '../drawings/numbers';
import type { How } from '../domain/notices/kinds';
import type { NoticeItem, NoticesPage, NoticesView } from '../schemas/api/notices';

export const NOTICES_DEFAULTS = { q: '', show: 'all', kind: 'all', site: '' } as const;
export type NoticesList = Omit<NoticesView, 'before'>;

export const HOW_WORDS: Record<How, string> = {
  at_once: 'Letter at once',
  digest: 'In the day’s letter',
  in_product: 'Here only',
  nothing: 'Not at all',
};

/** The heading of the notices, and what follows from it. */
export function noticesFinding(page: Pick<NoticesPage, 'unread' | 'hazards' | 'items'>): {
  finding: string;
  sentence: string;
} {
  const { unread, hazards, items } = page;
  if (hazards > 0)
    return {
      finding: `${counted(hazards, 'unread notice says', 'unread notices say')} that a string is not shutting down`,
      sentence: 'Read these first: each says what to treat as live.',
    };
  if (unread > 0)
    return {
      finding: `${unread >= 100 ? 'More than 99 notices' : counted(unread, 'notice')} you have not read`,
      sentence: 'Opening one marks it as read.',
    };
  if (items.length > 0)
    return { finding: 'You have read every notice', sentence: 'New ones appear here as they come.' };
  return {
    finding: 'Nothing to tell you',
    sentence: 'What you are told of appears here, and by letter where you chose so.',
  };
}

const isPressing = (item: NoticeItem): boolean => item.hazard && item.readAt === null && item.overAt === null;

/** Hazards that nobody has read stand first, the rest as it came. */
export const inOrder = (items: readonly NoticeItem[]): NoticeItem[] => [
  ...items.filter(isPressing),
  ...items.filter((item) => !isPressing(item)),
];

export const clockOfMinute = (minute: number): string =>
  `${String(Math.floor(minute / 60)).padStart(2, '0')}:${String(minute % 60).padStart(2, '0')}`;

/** Minutes since midnight of "07:30"; null for what is no time of day. */
export function minuteOfClock(typed: string): number | null {
  const [, hours, minutes] = /^(\d{1,2}):(\d{2})$/.exec(typed.trim()) ?? [];
  const h = Number(hours);
  const m = Number(minutes);
  return hours !== undefined && h < 24 && m < 60 ? h * 60 + m : null;
}
