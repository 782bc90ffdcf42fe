import { instant, type WaitingRows } from './copy';
import { QUARTER_S } from './quarters';

/** What a site made, quarter by quarter and by local day. */
export class SiteRollUp {
  readonly days = new Map<string, { energyAc: number; lost: number; lostGrid: number; minutes: number }>();
  private atS = NaN;
  private minutes = 0;
  private ac = 0;
  private poa = 0;

  constructor(
    private readonly siteId: number,
    private readonly localDay: (atS: number) => string,
    private readonly quarters: WaitingRows,
  ) {}

  /** @param now W and W/m², holding for `minutes` from `atS` */
  add(atS: number, minutes: number, now: { ac: number; poa: number; gridLost: boolean }): void {
    const start = Math.floor(atS / QUARTER_S) * QUARTER_S;
    if (start !== this.atS) {
      this.close();
      this.atS = start;
    }
    this.minutes += minutes;
    this.ac += now.ac * minutes;
    this.poa += now.poa * minutes;
    const day = this.localDay(start);
    const total = this.days.get(day) ?? { energyAc: 0, lost: 0, lostGrid: 0, minutes: 0 };
    this.days.set(day, total);
    total.energyAc += (now.ac * minutes) / 60;
    total.minutes += minutes;
    // Enough light to run by, and nothing made.
    if (now.poa > 60 && now.ac <= 0) {
      total.lost += minutes;
      if (now.gridLost) total.lostGrid += minutes;
    }
  }

  close(): void {
    if (this.minutes > 0 && (this.ac > 0 || this.poa > 0))
      this.quarters.push(
        `${instant(this.atS)}\t${this.siteId}\t${Math.round(this.ac / this.minutes)}\t${Math.round(this.poa / 60)}`,
      );
    this.minutes = 0;
    this.ac = 0;
    this.poa = 0;
  }
}
