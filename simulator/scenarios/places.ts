/** Where an invented site may stand: real co-ordinates and time zones round the globe, place names of our own. */
export interface Place {
  place: string;
  latitude: number;
  longitude: number;
  timeZone: string;
  altitude: number;
  /** °C: mean, half-swing by season, half-swing by day. */
  temperature: [number, number, number];
}

export const PLACES: Place[] = [
  spot('Kelp Bay', 20.8, -156.5, 'Pacific/Honolulu', 60, [24, 2, 4]),
  spot('Anse Corail', -17.6, -149.5, 'Pacific/Tahiti', 15, [26, 1.5, 3]),
  spot('Two Reefs', -23.1, -134.9, 'Pacific/Gambier', 20, [24, 2.5, 3]),
  spot('Arroyo Quince', 33.9, -117.4, 'America/Los_Angeles', 260, [18, 6, 7]),
  spot('Mesa Larga', 33.2, -111.6, 'America/Phoenix', 390, [22, 9, 8]),
  spot('Tres Nogales', 20.4, -101.2, 'America/Mexico_City', 1790, [18, 3, 8]),
  spot('Pecan Ferry', 29.6, -96.1, 'America/Chicago', 40, [21, 8, 6]),
  spot('Puerto Junco', -12.2, -76.9, 'America/Lima', 90, [20, 3, 4]),
  spot('Quebrada Honda', -29.8, -70.9, 'America/Santiago', 210, [16, 4, 6]),
  spot('Bois Mahaut', 15.4, -61.4, 'America/Dominica', 120, [26, 1.5, 3]),
  spot('Crique Sable', 4.9, -52.6, 'America/Cayenne', 20, [26, 1, 4]),
  spot('Campo Novo do Vale', -20.4, -47.3, 'America/Sao_Paulo', 820, [22, 3, 6]),
  spot('Lagoa do Cajueiro', -7.6, -35.3, 'America/Recife', 90, [26, 1.5, 4]),
  spot('Ribeira Funda', 15.1, -23.5, 'Atlantic/Cape_Verde', 70, [24, 2.5, 3]),
  spot('Moinho Velho', 37.4, -8.2, 'Europe/Lisbon', 110, [17, 6, 6]),
  spot('Adansi Cross', 6.2, -1.4, 'Africa/Accra', 240, [26, 1.5, 4]),
  spot('Oke Agbon', 7.4, 4.1, 'Africa/Lagos', 230, [26, 1.5, 5]),
  spot('Witkoppies', -28.6, 26.2, 'Africa/Johannesburg', 1340, [18, 6, 8]),
  spot('Kilima Mbuzi', -1.4, 37.2, 'Africa/Nairobi', 1600, [19, 1.5, 6]),
  spot('Wadi Sidr', 24.1, 55.6, 'Asia/Dubai', 130, [28, 8, 6]),
  spot('Pointe aux Herons', -20.2, 57.6, 'Indian/Mauritius', 90, [24, 2.5, 3]),
  spot('Kot Bahar', 26.2, 68.1, 'Asia/Karachi', 60, [27, 8, 8]),
  spot('Neemtal', 20.9, 77.4, 'Asia/Kolkata', 350, [27, 5, 7]),
  spot('Char Shimul', 23.6, 90.1, 'Asia/Dhaka', 10, [25, 5, 5]),
  spot('Ban Khlong Mai', 15.2, 100.4, 'Asia/Bangkok', 20, [28, 2, 5]),
  spot('Karri Siding', -31.4, 116.1, 'Australia/Perth', 180, [18, 6, 7]),
  spot('San Telmo Norte', 15.4, 120.7, 'Asia/Manila', 40, [27, 1.5, 4]),
  spot('Shirasagi', 35.2, 137.3, 'Asia/Tokyo', 60, [15, 11, 5]),
  spot('Bottle Tree Creek', -25.4, 151.4, 'Australia/Brisbane', 140, [21, 5, 7]),
  spot('Col des Niaoulis', -21.6, 165.5, 'Pacific/Noumea', 80, [23, 3, 4]),
  spot('Kauri Landing', -37.1, 175.2, 'Pacific/Auckland', 50, [15, 4, 5]),
  spot('Mata Vula', -21.2, -175.2, 'Pacific/Tongatapu', 25, [24, 2.5, 3]),
];

function spot(
  place: string,
  latitude: number,
  longitude: number,
  timeZone: string,
  altitude: number,
  temperature: [number, number, number],
): Place {
  return { place, latitude, longitude, timeZone, altitude, temperature };
}

/** Mean solar hour (0 … 24) at a longitude; the equation of time (up to a quarter of an hour) is left out. */
export const solarHour = (epochS: number, longitude: number): number =>
  (((epochS / 3600 + longitude / 15) % 24) + 24) % 24;

/** Hours between two moments of a day, the shorter way round. */
function apart(a: number, b: number): number {
  const d = Math.abs(a - b);
  return Math.min(d, 24 - d);
}

/** The free place where the sun stands nearest to `hour` at that moment; it is taken out of `free`. */
export function placeAtHour(free: Place[], epochS: number, hour: number): Place {
  let best = 0;
  let distance = Infinity;
  free.forEach((p, i) => {
    const d = apart(solarHour(epochS, p.longitude), hour);
    if (d < distance) [best, distance] = [i, d];
  });
  const [taken] = free.splice(best, 1);
  if (!taken) throw new Error('No place is left for another site.');
  return taken;
}

/**
 * A place of its own for each of `hours` (in their order): the sun stands near all of them at that moment, no one is
 * pushed far off for another's sake. Places are exchanged until no exchange brings the squares of the distances down.
 */
export function placesAtHours(epochS: number, hours: readonly number[]): Place[] {
  const places = [...PLACES];
  if (hours.length > places.length) throw new Error('There are more sites than places.');
  const cost = (i: number, place: Place | undefined): number => {
    const hour = hours[i];
    return hour === undefined || !place ? 0 : apart(solarHour(epochS, place.longitude), hour) ** 2;
  };
  for (let better = true; better;) {
    better = false;
    for (let i = 0; i < hours.length; i++)
      for (let j = i + 1; j < places.length; j++) {
        const [a, b] = [places[i], places[j]];
        if (!a || !b || cost(i, b) + cost(j, a) >= cost(i, a) + cost(j, b) - 1e-9) continue;
        [places[i], places[j]] = [b, a];
        better = true;
      }
  }
  return places.slice(0, hours.length);
}
