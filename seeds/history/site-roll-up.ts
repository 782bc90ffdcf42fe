import { instant, type WaitingRows } from './copy';
import { QUARTER_S } from './quarters';

export interface SiteDayTotal {
  energyAc: number;
  /** Minutes: seen, with enough light to run by, and of those without power. */
  minutes: number;
  lit: number;
  lost: number;
  lostGrid: number;
  /** W/m² minutes of the lost ones. */
  lostLight: number;
  lostLightGrid: number;
}

/** What a site made, quarter by quarter and by local day. */
export class SiteRollUp {
  readonly days = new Map<string, SiteDayTotal>();
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
    const total = this.days.get(day) ?? {
      energyAc: 0,
      minutes: 0,
      lit: 0,
      lost: 0,
      lostGrid: 0,
      lostLight: 0,
      lostLightGrid: 0,
    };
    this.days.set(day, total);
    total.energyAc += (now.ac * minutes) / 60;
    total.minutes += minutes;
    if (now.poa <= 60) return; // not enough light to run by
    total.lit += minutes;
    if (now.ac > 0) return;
    total.lost += minutes;
    total.lostLight += now.poa * minutes;
    if (!now.gridLost) return;
    total.lostGrid += minutes;
    total.lostLightGrid += now.poa * minutes;
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
