import type { CapturePhone, PhoneState } from '../../lib/capture-phone';
import type { CaptureSnapshot, CaptureString } from '../../schemas/api/capture';
import type { CaptureView } from './view';

/** What every screen of the phone is given. */
export interface SiteProps {
  /** null until the browser has its store. */
  phone: CapturePhone | null;
  state: PhoneState;
  /** The site with what waits on this phone over it. */
  site: CaptureSnapshot;
  view: CaptureView;
  change: (some: Partial<CaptureView>, how?: 'typed' | 'chosen') => void;
  /** The phone's clock, a tick each half minute. */
  clock: Date;
  /** Says a sentence once, at the top and to screen readers. */
  say: (words: string) => void;
}
export interface ScreenProps extends SiteProps {
  string: CaptureString;
}
