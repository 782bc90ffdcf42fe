import type { Knex } from 'knex';

/** What a kWh is worth in the demo: a currency for each organisation, and a price that changed once. */
const MONEY: Record<string, { currency: string; prices: readonly [from: string, price: number][] }> = {
  'Europe/London': {
    currency: 'GBP',
    prices: [
      ['2024-01-01', 0.245],
      ['2026-04-01', 0.262],
    ],
  },
  'Europe/Dublin': { currency: 'EUR', prices: [['2024-01-01', 0.301]] },
};

export async function seedPrices(tx: Knex.Transaction): Promise<void> {
  for (const [timeZone, { currency, prices }] of Object.entries(MONEY)) {
    await tx('organisation').where({ time_zone: timeZone }).update({ currency });
    for (const [from, price] of prices)
      await tx.raw(
        `insert into tariff (site_id, from_on, price_kwh, created_by)
         select s.id, ?, ?, (select p.id from person p where p.organisation_id = o.id and p.role = 'manager' order by p.id limit 1)
         from site s join organisation o on o.id = s.organisation_id where o.time_zone = ? and s.stage = 'operating'`,
        [from, price, timeZone],
      );
  }
}
