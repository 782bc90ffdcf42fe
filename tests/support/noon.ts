import type pg from 'pg';

/** Moves every site to where the sun stands high at this moment: judgements by daylight then go by day. */
export async function noonEverywhere(owner: pg.Pool): Promise<void> {
  const now = new Date();
  const hours = now.getUTCHours() + now.getUTCMinutes() / 60;
  await owner.query('update site set longitude = $1, latitude = 0', [15 * (12 - hours)]);
}
