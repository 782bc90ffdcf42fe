/** What energy is worth: a price a kWh from a day on, until the next. */
export interface TariffFrom {
  /** yyyy-mm-dd */
  from: string;
  priceKWh: number;
}

/** The price in force on a day; null before the first. */
export function priceOn(day: string, tariffs: readonly TariffFrom[]): number | null {
  let best: TariffFrom | null = null;
  for (const t of tariffs) if (t.from <= day && (best === null || t.from > best.from)) best = t;
  return best?.priceKWh ?? null;
}

export interface Worth {
  money: number;
  /** Energy of days without a price, kWh: not in `money`. */
  unpricedKWh: number;
}

/** @returns null where no day has a price */
export function worthOf(
  days: readonly { day: string; energyKWh: number }[],
  tariffs: readonly TariffFrom[],
): Worth | null {
  let money = 0;
  let priced = false;
  let unpricedKWh = 0;
  for (const { day, energyKWh } of days) {
    const price = priceOn(day, tariffs);
    if (price === null) unpricedKWh += energyKWh;
    else {
      priced = true;
      money += energyKWh * price;
    }
  }
  return priced ? { money, unpricedKWh } : null;
}
