import { useEffect } from 'react';
import { Caution } from '../../components/ui/Caution';
import { DayCurve } from '../../drawings/DayCurve';
import type { SharedSite } from '../../schemas/api/share';
import { lifeCard, monthCard, yearCard } from './cards';
import { dayHours } from './day-hours';
import { LINK_OVER } from './SharedRoof';
import { dayLabel } from './TodaySheet';
import { useShared } from './use-shared';
import { customerWords, heardAt } from '../../words/customer-sentences';
import { sharedScreen } from '../../words/shared-page';

/** A screen that runs for months takes a new build of the page twice a day. */
const RELOAD_AFTER_MS = 12 * 3_600_000;

/** The same as SharedRoof for a screen in a lobby, read from some metres; light by day at the roof, dark by night. */
export function SharedScreen({ token, initial }: { token: string; initial: SharedSite }) {
  const { site, ended, late } = useShared(token, initial);
  const { now, timeZone } = site;
  useEffect(() => {
    document.documentElement.dataset.theme = now.daylight ? 'light' : 'dark';
  }, [now.daylight]);
  useEffect(() => {
    // only while the server answers: a screen that shows its last reading is better than one that shows none
    if (Date.parse(now.at) - Date.parse(initial.now.at) > RELOAD_AFTER_MS) window.location.reload();
  }, [now.at, initial.now.at]);
  if (ended)
    return (
      <main id="main" tabIndex={-1} className="grid min-h-dvh content-center px-[4vw] outline-none">
        <h1 className="text-[clamp(30px,4vw,84px)] leading-[1.1] tracking-[-0.03em]">{LINK_OVER.title}</h1>
        <p className="mt-[1vw] text-[clamp(17px,1.6vw,36px)] leading-[1.35] text-ink-2">
          {LINK_OVER.sentence}
        </p>
      </main>
    );
  const words = customerWords(now, site.today, timeZone, site, 'anybody');
  const curve = dayHours(site.today, now.at);
  const label = dayLabel(site.today);
  return (
    <div className="flex min-h-dvh flex-col lg:h-dvh gap-[clamp(16px,1.6vw,36px)] px-[clamp(16px,3.2vw,72px)] py-[clamp(16px,2vw,44px)]">
      <header className="flex flex-wrap items-baseline justify-between gap-x-8 text-[clamp(16px,1.35vw,30px)] leading-[1.3]">
        <span className="font-semibold tracking-[-0.02em]">{site.name}</span>
        <span className="text-ink-2">
          {sharedScreen.lookedAfterByOrganisation(site.organisation, late, heardAt(now), now.at, timeZone)}
        </span>
      </header>
      <main
        id="main"
        tabIndex={-1}
        className="flex flex-1 flex-col lg:min-h-0 gap-[clamp(16px,1.6vw,36px)] outline-none"
      >
        <div>
          <h1 className="text-[clamp(30px,3.5vw,76px)] leading-[1.1] tracking-[-0.03em]">{words.heading}</h1>
          <p className="mt-[0.6em] max-w-[72ch] text-[clamp(17px,1.45vw,32px)] leading-[1.35] text-ink-2">
            {words.sentences.join(' ')}
          </p>
        </div>
        {words.caution && (
          <div className="[&_aside_svg]:h-[0.9em] [&_aside_svg]:w-[1em] [&_aside]:text-[clamp(16px,1.35vw,30px)] [&_aside]:leading-[1.35]">
            <Caution strong={words.caution.strong}>{words.caution.rest}</Caution>
          </div>
        )}
        <section
          aria-label={sharedScreen.today}
          className="flex flex-1 flex-col justify-center lg:min-h-[28vh] border-b border-t-2 border-b-rule border-t-ink bg-sheet px-[1vw] py-[0.8vw]"
        >
          <div className="hidden sm:block lg:min-h-0 lg:flex-1 lg:[&_svg]:!h-full">
            <DayCurve {...curve} label={label} width={1000} height={285} />
          </div>
          <div className="sm:hidden">
            <DayCurve {...curve} label={label} width={360} height={210} />
          </div>
          <p className="mt-1 px-1 text-[clamp(13px,1vw,22px)] leading-[1.3] text-ink-2">
            {sharedScreen.todaySolidWhatWas}
          </p>
        </section>
        <dl className="grid gap-[clamp(12px,1.6vw,36px)] sm:grid-cols-3">
          {[monthCard(site.month), yearCard(site.year, site.life), lifeCard(site.life)].map((card) => (
            <div key={card.label} className="border-t-2 border-t-ink pt-[0.6vw]">
              <dt className="text-[clamp(14px,1.1vw,24px)] leading-[1.3] text-ink-2">{card.label}</dt>
              <dd>
                <span className="block text-[clamp(28px,2.9vw,64px)] font-semibold leading-[1.15] tracking-[-0.02em]">
                  {card.figure}
                </span>
                <span className="block text-[clamp(14px,1.1vw,24px)] leading-[1.3] text-ink-2">
                  {card.note}
                </span>
              </dd>
            </div>
          ))}
        </dl>
      </main>
    </div>
  );
}
