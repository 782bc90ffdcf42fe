import { monthName } from '../../../domain/output/period';
import { energy, number, percent, quantity } from '../../../drawings/numbers';
import { PAPER } from '../../../drawings/paint';
import { longDate } from '../../../drawings/times';
import type { SiteFigures } from '../../../schemas/api/figures';
import { fileName } from '../csv';
import { fingerprintOf } from '../fingerprint';
import { Paper } from '../pdf/paper';
import { siteWords, type SiteWords } from './words';

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
      foot: `As of ${date} · fingerprint of the data (SHA-256) ${fingerprint.slice(0, 32)}`,
    },
  );
  paper.space(10);
  if (logo)
    paper.figure(44, (x, y) => {
      paper.pen.image(logo, x, y, { fit: [150, 36] });
    });
  paper.text(`${f.site.organisation} · month report`, { size: 11, colour: PAPER.ink2 });
  paper.text(words.finding, { size: 22, weight: 600, leading: 1.2 });
  paper.text(words.sentence, { size: 11.5, colour: PAPER.ink2 });
  if (f.elapsed?.running)
    paper.text(`The month is not over: the figures stand as of ${date}.`, { colour: PAPER.rustInk });
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
  paper.heading('Figures', 2);
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
  paper.heading('Where the light went', 2);
  const whole = Math.max(1e-9, bars[0]?.kWh ?? 0);
  const fill = { ink: PAPER.ink3, rust: PAPER.rust, slate: PAPER.slate, petrol: PAPER.petrol };
  const room = paper.width - 160 - 120;
  let left = whole;
  for (const bar of bars) {
    const to = bar.total ? bar.kWh : left;
    const from = bar.total ? 0 : left - bar.kWh;
    left = bar.total ? bar.kWh : from;
    paper.figure(17, (x, y) => {
      paper.setAt(bar.label, x, y, 154, { size: 8.5 });
      const start = (Math.min(from, to) / whole) * room;
      const wide = Math.max(1, (Math.abs(to - from) / whole) * room);
      paper.pen.rect(x + 160 + start, y + 1, Math.min(wide, room), 9).fill(fill[bar.tone]);
      const sign = bar.total ? '' : bar.kWh >= 0 ? '−' : '+';
      paper.setAt(
        `${sign}${energy(Math.abs(bar.kWh) * 1000)} · ${percent(Math.abs(bar.kWh) / whole, 1)}`,
        x + paper.width - 115,
        y,
        115,
        { size: 8.5, align: 'right' },
      );
    });
  }
}

function dayBars(paper: Paper, { days, ofDays }: SiteWords): void {
  if (days.length === 0) return;
  paper.heading('Day by day', 2);
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
  paper.text(`${ofDays} A rust edge marks a day with missing data or lost light.`, {
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
  paper.heading(`${year} beside ${year - 1}`, 2);
  paper.table(
    [
      { header: 'Month', share: 2 },
      { header: String(year), share: 2, align: 'right' },
      { header: String(year - 1), share: 2, align: 'right' },
      { header: 'Change', share: 1.4, align: 'right' },
      { header: `Ratio ${year}`, share: 1.4, align: 'right' },
    ],
    rows.map(({ month, now, before }) => [
      monthName(month),
      now ? energy(now.energyKWh * 1000) : '–',
      before ? energy(before.energyKWh * 1000) : '–',
      now &&
      before &&
      before.energyKWh > 0 &&
      Number(today.slice(0, 4)) * 12 + Number(today.slice(5, 7)) > year * 12 + month
        ? `${now.energyKWh >= before.energyKWh ? '+' : '−'}${percent(Math.abs(now.energyKWh / before.energyKWh - 1))}`
        : '–',
      number(now?.performanceRatio, 3),
    ]),
  );
}

function causes(paper: Paper, { losses, site }: SiteFigures): void {
  paper.heading('What was wrong', 2);
  paper.table(
    [
      { header: 'Cause', share: 5 },
      { header: 'Since', share: 2 },
      { header: 'Until', share: 2 },
      { header: 'Loss in the month', share: 2, align: 'right' },
    ],
    losses.map((l) => [
      l.headline,
      longDate(l.since, site.timeZone),
      l.closedAt ? longDate(l.closedAt, site.timeZone) : 'still there',
      l.kWh > 0 ? energy(l.kWh * 1000) : 'not known',
    ]),
    'No cause was found in this month.',
  );
}

function table(paper: Paper, { days }: SiteFigures): void {
  paper.heading('The days', 2);
  paper.table(
    [
      { header: 'Day', share: 2 },
      { header: 'Energy', share: 1.7, align: 'right' },
      { header: 'kWh/kWp', share: 1.4, align: 'right' },
      { header: 'kWh/m²', share: 1.4, align: 'right' },
      { header: 'Ratio', share: 1.2, align: 'right' },
      { header: 'At 25 °C', share: 1.2, align: 'right' },
      { header: 'Lost', share: 1.3, align: 'right' },
      { header: 'Data', share: 1.2, align: 'right' },
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
  paper.heading('How it is reckoned', 3);
  paper.text(
    'Yields and ratios follow IEC 61724-1. Each counts only quarters of an hour that have all it needs; how much that was stands beside it. Light is what the sensor in the plane measures: strings in other planes are measured by it too. Losses of causes are estimates and may overlap with dirt and shade. Wakeline watches and never switches; no figure here says that anything may be touched.',
    { size: 8.5, colour: PAPER.ink2 },
  );
}
