import { monthName } from '../../../words/domain-periods';
import { laidBars } from '../../../drawings/loss-bars';
import { energy, number, percent, quantity } from '../../../drawings/numbers';
import { PAPER } from '../../../drawings/paint';
import { longDate } from '../../../drawings/times';
import { yearChange } from '../../../drawings/year-change';
import type { SiteFigures } from '../../../schemas/api/figures';
import { fileName } from '../csv';
import { fingerprintOf } from '../fingerprint';
import { Paper } from '../pdf/paper';
import { siteWords, type SiteWords } from './words';
import { papersFiguresMonthReport } from '../../../words/papers-figures';

/**
 * A month on paper: what was made, where the rest went, day by day, and what was wrong.
 * @param logo of the organisation, PNG
 */
export async function monthReport(f: SiteFigures, logo: Buffer | null): Promise<Response> {
  const bytes = await monthReportPdf(f, logo);
  return new Response(new Uint8Array(bytes), {
    headers: {
      'content-type': 'application/pdf',
      'content-disposition': `attachment; filename="${fileName(`${f.site.name}-${f.period.key}`)}.pdf"`,
      'cache-control': 'private, no-store',
      'x-content-type-options': 'nosniff',
    },
  });
}

export async function monthReportPdf(f: SiteFigures, logo: Buffer | null = null): Promise<Buffer> {
  const at = new Date(f.at);
  const words = siteWords(f);
  const date = longDate(at, f.site.timeZone);
  const { days, now, losses, steps, period } = f;
  const fingerprint = fingerprintOf({ site: f.site.id, period: period.key, days, now, losses, steps });
  const paper = new Paper(
    { title: `${f.site.name}: ${period.label}`, author: f.site.organisation, at },
    {
      head: `${f.site.name} · ${period.label}`,
      foot: papersFiguresMonthReport.asOfFingerprintOf(date, fingerprint.slice(0, 32)),
    },
  );
  paper.space(10);
  if (logo)
    paper.figure(44, (x, y) => {
      paper.pen.image(logo, x, y, { fit: [150, 36] });
    });
  paper.text(papersFiguresMonthReport.monthReport(f.site.organisation), { size: 11, colour: PAPER.ink2 });
  paper.text(words.finding, { size: 22, weight: 600, leading: 1.2 });
  paper.text(words.sentence, { size: 11.5, colour: PAPER.ink2 });
  if (f.elapsed?.running) paper.text(papersFiguresMonthReport.theMonthIsNot(date), { colour: PAPER.rustInk });
  figures(paper, words);
  if (words.bars.length > 0) light(paper, words);
  dayBars(paper, words);
  years(paper, f);
  causes(paper, f);
  table(paper, f);
  method(paper);
  return paper.end();
}

function figures(paper: Paper, { cards }: SiteWords): void {
  paper.heading(papersFiguresMonthReport.figures, 2);
  const width = paper.width / 3;
  for (let i = 0; i < cards.length; i += 3)
    paper.figure(78, (x, y) => {
      cards.slice(i, i + 3).forEach((card, k) => {
        const at = x + k * width;
        paper.setAt(card.label, at, y, width - 14, { size: 8.5, colour: PAPER.ink2 });
        paper.setAt(card.figure, at, y + 12, width - 14, { size: 17, weight: 600 });
        paper.setAt(card.note, at, y + 36, width - 14, { size: 8, colour: PAPER.ink2, leading: 1.25 });
      });
    });
}

function light(paper: Paper, { bars }: SiteWords): void {
  paper.heading(papersFiguresMonthReport.whereTheLightWent, 2);
  const fill = { ink: PAPER.ink3, rust: PAPER.rust, slate: PAPER.slate, petrol: PAPER.petrol };
  const room = paper.width - 160 - 120;
  for (const bar of laidBars(bars))
    paper.figure(17, (x, y) => {
      paper.setAt(bar.label, x, y, 154, { size: 8.5 });
      paper.pen
        .rect(x + 160 + bar.start * room, y + 1, Math.max(1, bar.width * room), 9)
        .fill(fill[bar.tone]);
      paper.setAt(bar.words, x + paper.width - 115, y, 115, { size: 8.5, align: 'right' });
    });
}

function dayBars(paper: Paper, { days, ofDays }: SiteWords): void {
  if (days.length === 0) return;
  paper.heading(papersFiguresMonthReport.dayByDay, 2);
  const height = 92;
  paper.figure(height + 26, (x, y) => {
    const step = paper.width / Math.max(28, days.length);
    days.forEach((d, i) => {
      const at = x + i * step;
      if (d.share !== null) {
        const tall = d.share * (height - 4);
        paper.pen.rect(at + step * 0.15, y + height - tall, step * 0.7, tall).fill(PAPER.petrol);
      }
      if (d.marked) paper.pen.rect(at + step * 0.15, y + height + 1, step * 0.7, 2).fill(PAPER.rust);
      paper.setAt(String(Number(d.day.slice(8))), at, y + height + 5, step, {
        size: 6.5,
        colour: PAPER.ink2,
      });
    });
    paper.pen
      .moveTo(x, y + height)
      .lineTo(x + paper.width, y + height)
      .lineWidth(0.5)
      .strokeColor(PAPER.ink3)
      .stroke();
  });
  paper.text(papersFiguresMonthReport.rustEdgeMarksDay(ofDays), {
    size: 8.5,
    colour: PAPER.ink2,
  });
}

function years(paper: Paper, { months, period, today }: SiteFigures): void {
  const year = Number(period.key.slice(0, 4));
  const rows = Array.from({ length: 12 }, (_, i) => {
    const of = (y: number) => months.find((m) => m.year === y && m.month === i + 1);
    return { month: i + 1, now: of(year), before: of(year - 1) };
  }).filter((r) => r.now ?? r.before);
  paper.heading(papersFiguresMonthReport.yearBesideYear(year), 2);
  paper.table(
    [
      { header: papersFiguresMonthReport.month, share: 2 },
      { header: String(year), share: 2, align: 'right' },
      { header: String(year - 1), share: 2, align: 'right' },
      { header: papersFiguresMonthReport.change, share: 1.4, align: 'right' },
      { header: papersFiguresMonthReport.ratioYear(year), share: 1.4, align: 'right' },
    ],
    rows.map(({ month, now, before }) => [
      monthName(month),
      now ? energy(now.energyKWh * 1000) : '–',
      before ? energy(before.energyKWh * 1000) : '–',
      yearChange(`${year}-${String(month).padStart(2, '0')}`, now, before, today),
      number(now?.performanceRatio, 3),
    ]),
  );
}

function causes(paper: Paper, { losses, site }: SiteFigures): void {
  paper.heading(papersFiguresMonthReport.whatWasWrong, 2);
  paper.table(
    [
      { header: papersFiguresMonthReport.cause, share: 5 },
      { header: papersFiguresMonthReport.since, share: 2 },
      { header: papersFiguresMonthReport.until, share: 2 },
      { header: papersFiguresMonthReport.lossInTheMonth, share: 2, align: 'right' },
    ],
    losses.map((l) => [
      l.headline,
      longDate(l.since, site.timeZone),
      l.closedAt ? longDate(l.closedAt, site.timeZone) : papersFiguresMonthReport.stillThere,
      l.kWh > 0 ? energy(l.kWh * 1000) : papersFiguresMonthReport.notKnown,
    ]),
    papersFiguresMonthReport.noCauseWasFound,
  );
}

function table(paper: Paper, { days }: SiteFigures): void {
  paper.heading(papersFiguresMonthReport.theDays, 2);
  paper.table(
    [
      { header: papersFiguresMonthReport.day, share: 2 },
      { header: papersFiguresMonthReport.energy, share: 1.7, align: 'right' },
      { header: 'kWh/kWp', share: 1.4, align: 'right' },
      { header: 'kWh/m²', share: 1.4, align: 'right' },
      { header: papersFiguresMonthReport.ratio, share: 1.2, align: 'right' },
      { header: papersFiguresMonthReport.at25C, share: 1.2, align: 'right' },
      { header: papersFiguresMonthReport.lost, share: 1.3, align: 'right' },
      { header: papersFiguresMonthReport.data, share: 1.2, align: 'right' },
    ],
    days.map(({ day, figures: d }) => [
      day,
      energy(d.energyKWh * 1000),
      number(d.specificYieldKWhKWp, 2),
      number(d.insolationKWhM2, 2),
      number(d.performanceRatio, 3),
      number(d.performanceRatioStc, 3),
      quantity(d.lostMinutes, 'min'),
      percent(d.completeness),
    ]),
  );
}

function method(paper: Paper): void {
  paper.heading(papersFiguresMonthReport.howItIsReckoned, 3);
  paper.text(papersFiguresMonthReport.yieldsAndRatiosFollow, { size: 8.5, colour: PAPER.ink2 });
}
