import type { BenchPlant } from './plant';

/**
 * Readings of a working day, made up: each unit differs from the others and from its own last minute, and one in
 * fifty goes into shutdown for a few minutes every now and then, so that verdicts and events come with the load.
 */
export interface Reading {
  voltage: number;
  current: number;
  temperature: number;
  signal: number;
  via: number;
  state: number;
}

const hash = (a: number, b: number): number => {
  let h = Math.imul(a ^ 0x9e3779b9, 0x85ebca6b) ^ Math.imul(b + 0x7f4a7c15, 0xc2b2ae35);
  h ^= h >>> 15;
  h = Math.imul(h, 0x27d4eb2f);
  return (h ^ (h >>> 13)) >>> 0;
};

export function readingOf(unit: number, minute: number): Reading {
  const h = hash(unit, minute);
  const held = unit % 50 === 7 && Math.floor(minute / 8 + unit) % 3 === 0;
  return {
    voltage: held ? 58 + (h & 7) : 3150 + (hash(unit, 0) % 90) + (h & 31),
    current: 8100 + (hash(unit >> 5, minute) & 255) + (h & 15),
    temperature: 395 + (h & 63),
    signal: -60 - (hash(unit, 1) % 30) - (h & 3),
    via: 1 + (unit % 3),
    state: held ? 2 : 1,
  };
}

const FIELDS = [
  ['voltageOut', 'voltage'],
  ['current', 'current'],
  ['temperature', 'temperature'],
  ['signal', 'signal'],
  ['via', 'via'],
  ['state', 'state'],
] as const;

/** One site's minute as the logger would send it, without its number. */
export function framesMessage(
  plant: BenchPlant,
  site: number,
  minute: number,
  atS: number,
  roster: number,
): string {
  const n = plant.stringsPerSite;
  const frames: Record<string, number[]>[] = [];
  for (let s = 0; s < n; s++) {
    const first = (site * n + s) * plant.unitsPerString;
    const frame: Record<string, number[]> = {};
    const readings = Array.from({ length: plant.unitsPerString }, (_, u) => readingOf(first + u, minute));
    for (const [name, key] of FIELDS) frame[name] = readings.map((r) => r[key]);
    frames.push(frame);
  }
  return JSON.stringify({
    type: 'frames',
    seq: minute,
    roster,
    at: new Array<number>(n).fill(atS),
    string: Array.from({ length: n }, (_, s) => s),
    frames,
  });
}

/** The same readings as narrow rows, in the text format of COPY. */
export function* narrowRows(plant: BenchPlant, minutes: number, startS: number): Generator<string> {
  const units = plant.sites.length * plant.stringsPerSite * plant.unitsPerString;
  for (let minute = 0; minute < minutes; minute++) {
    const at = new Date((startS + 60 * minute) * 1000).toISOString();
    let text = '';
    for (let unit = 0; unit < units; unit++) {
      const r = readingOf(unit, minute);
      text += `${at}\t${unit}\t${r.voltage / 100}\t${r.current / 1000}\t${r.temperature / 10}\t${r.signal}\t${r.via}\t${r.state}\n`;
    }
    yield text;
  }
}
