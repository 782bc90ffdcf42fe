import { Mark } from '../../components/shell/Mark';
import { Button, ButtonLink } from '../../components/ui/Button';
import { useReaderZone } from '../../components/ui/reader-zone';
import { fullTime } from '../../drawings/times';
import { paths } from '../../schemas/paths';
import type { CapturePhone, PhoneState } from '../../lib/capture-phone';
import { VIEW_DEFAULTS, type CaptureView } from './view';
import { stripWords } from './words';
import { head } from '../../words/capture';

interface Props {
  phone: CapturePhone | null;
  state: PhoneState;
  title: string;
  aside: string;
  change: (some: Partial<CaptureView>) => void;
  clock: Date;
  /** What was done last, said once. */
  said: string;
}

/** The head of every screen: which string, how old the page is, what waits and why. */
export function Head({ phone, state, title, aside, change, clock, said }: Props) {
  const words = stripWords(state, clock, useReaderZone());
  const { snapshot } = state;
  const sending = state.sending !== null;
  return (
    <header className="-mx-4">
      <div className="flex min-h-[52px] items-center gap-3 border-b border-rule bg-sheet px-4">
        <button
          type="button"
          onClick={() => change(VIEW_DEFAULTS)}
          aria-label={head.toTheListOf}
          className="-ml-2 flex h-[48px] w-[48px] shrink-0 items-center justify-center"
        >
          <Mark />
        </button>
        <p className="min-w-0 flex-1 text-[18px] font-semibold tracking-[-0.02em]">{title}</p>
        <p className="text-right text-[14px] leading-[18px] text-ink-2">{aside}</p>
      </div>
      <div className="border-b border-rule-faint px-4 py-1">
        <div className="flex min-h-[24px] flex-wrap items-center gap-x-3 gap-y-1">
          {words.age && snapshot && (
            <p className="text-sm text-ink-2" title={fullTime(snapshot.at, snapshot.site.timeZone)}>
              {words.age}
            </p>
          )}
          {words.waiting && (
            <button
              type="button"
              onClick={() => change({ ...VIEW_DEFAULTS, part: 'waiting' })}
              className="min-h-[44px] px-1 text-[15px] font-semibold underline underline-offset-[3px]"
            >
              {words.waiting}
            </button>
          )}
          {words.waiting && words.mayTry && (
            <Button className="ml-auto min-h-[44px]" onClick={() => void phone?.sendNow()}>
              {head.sendNow}
            </Button>
          )}
          {sending && (
            <p role="status" className="ml-auto text-sm text-ink-2">
              {head.sending}
            </p>
          )}
        </div>
        {words.why && (
          <div role="status" className="pb-2">
            <p className="text-[15px] text-rust-ink">{words.why}</p>
            {words.signIn && typeof window !== 'undefined' && (
              <ButtonLink
                className="mt-2 min-h-[48px]"
                weight="primary"
                href={paths.signIn(window.location.pathname + window.location.search)}
              >
                {head.signInAgain}
              </ButtonLink>
            )}
          </div>
        )}
        {words.others && <p className="pb-2 text-sm text-ink-2">{words.others}</p>}
        {state.fault && (
          <p role="alert" className="pb-2 text-[15px] font-medium text-rust-ink">
            {state.fault.message}
          </p>
        )}
        <p role="status" className="text-[15px] font-medium text-petrol empty:hidden">
          {said}
        </p>
      </div>
    </header>
  );
}
