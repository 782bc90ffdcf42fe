import { PAPER } from '../../../drawings/paint';
import { number, quantity } from '../../../drawings/numbers';
import { fullTime, longDate } from '../../../drawings/times';
import type { Paper } from '../pdf/paper';
import type { PackData } from './data';

/** The first half of the papers: what the system is, who worked on it, how it is laid out. */

export const RULE_SETS: Record<string, string> = {
  rapid_shutdown_30s: 'rapid shutdown, 30 s (NEC 690.12, 2017 and later editions)',
  rapid_shutdown_10s: 'rapid shutdown, 10 s (the earlier edition)',
  hazard_control: 'a listed PV hazard control system',
  none: 'none',
};
const STRUCTURES: Record<string, string> = {
  one_or_two_family_dwelling: 'one- or two-family dwelling',
  other_building: 'other building',
  not_on_building: 'not on a building',
};
const KINDS: Record<string, string> = {
  shutdown_only: 'shutdown-only',
  monitored: 'monitored',
  optimizing: 'optimizing',
};
export const kindWords = (kind: string): string => KINDS[kind] ?? kind;

const temperature = (value: number | null): string =>
  value === null ? 'not entered' : quantity(value, '°C');

/** Power of the modules at STC, W. */
export function moduleCapacity({ strings, moduleTypes }: PackData): number {
  const watts = new Map(moduleTypes.map((m) => [m.name, m.vmp_ref * m.imp_ref]));
  return strings.reduce(
    (sum, s) => sum + s.slots.reduce((n, slot) => n + (watts.get(slot.moduleType) ?? 0), 0),
    0,
  );
}

export function systemData(paper: Paper, data: PackData): void {
  const { site } = data;
  paper.heading('1  System data', 1);
  const units = data.strings.reduce((n, s) => n + s.slots.length, 0);
  paper.facts([
    ['Site', site.name],
    ['Place', site.place],
    [
      'Coordinates',
      `${site.latitude.toFixed(4)}°, ${site.longitude.toFixed(4)}°, ${number(site.altitude)} m above sea level`,
    ],
    ['Times in these papers', site.timeZone],
    ['Structure', STRUCTURES[site.structure] ?? site.structure],
    ['Shutdown rule set', RULE_SETS[site.ruleSet] ?? site.ruleSet],
    ['Shutdown switch', site.switchPlace],
    [
      'Modules',
      `${number(units)}, ${quantity(moduleCapacity(data) / 1000, 'kW', 1)} at standard test conditions`,
    ],
    ['Strings', number(data.strings.length)],
    [
      'Inverters',
      `${number(data.inverters.length)}, ${quantity(data.inverters.reduce((n, i) => n + i.acPowerMax, 0) / 1000, 'kW', 1)} AC`,
    ],
    [
      'Design temperatures',
      `coldest ${temperature(site.temperatureMin)}, hottest air ${temperature(site.temperatureMax)}`,
    ],
    ['Entered on', longDate(site.createdAt, site.timeZone)],
    ['In service since', site.switchedOnOn ? longDate(`${site.switchedOnOn}T12:00:00Z`, 'UTC') : ''],
  ]);
  paper.table(
    [
      { header: 'Plane', share: 2 },
      { header: 'Tilt', share: 1, align: 'right' },
      { header: 'Azimuth, clockwise from north', share: 2, align: 'right' },
    ],
    data.planes.map((p) => [p.name, quantity(p.tilt, '°'), quantity(p.azimuth, '°')]),
  );
}

export function people(paper: Paper, data: PackData): void {
  const { site } = data;
  paper.heading('2  People', 1);
  paper.facts([
    ['Commissioned by', site.organisation.name],
    ['Telephone', site.organisation.phone ?? ''],
    ['Contact for the site', [site.contactName, site.contactPhone].filter(Boolean).join(', ')],
  ]);
  paper.table(
    [
      { header: 'Person', share: 2 },
      { header: 'Role', share: 1 },
      { header: 'Recorded', share: 4 },
    ],
    data.people.map((p) => [p.name, p.role, p.did.join(', ')]),
  );
}

/** Inverters left, their inputs as branches, the strings that hang on each. */
export function singleLine(paper: Paper, data: PackData): void {
  const first = data.inverters[0]?.inputs.filter((i) => i.strings.length > 0).length ?? 0;
  paper.heading('3  Single-line description', 1, 80 + first * 24);
  paper.text(
    'Every string ends in a home run at the inverter input named here; strings named together share the input and its voltage.',
  );
  const units = new Map(data.strings.map((s) => [s.name, s]));
  for (const inverter of data.inverters) {
    const rows = inverter.inputs.filter((i) => i.strings.length > 0);
    const spare = inverter.inputs.length - rows.length;
    const height = Math.max(58, 20 + rows.length * 24);
    paper.figure(height + 10, (x, y) => {
      const { pen } = paper;
      const box = { width: 122, height: Math.max(44, height - 14) };
      pen
        .rect(x, y + 4, box.width, box.height)
        .lineWidth(1.2)
        .strokeColor(PAPER.ink)
        .stroke();
      paper.setAt(inverter.name, x + 8, y + 10, box.width - 16, { size: 9.5, weight: 600 });
      paper.setAt(
        [inverter.type ?? '', `${quantity(inverter.acPowerMax / 1000, 'kW', 1)} AC`]
          .filter(Boolean)
          .join('\n'),
        x + 8,
        y + 24,
        box.width - 16,
        { size: 8, colour: PAPER.ink2 },
      );
      rows.forEach((input, i) => {
        const at = y + 16 + i * 24;
        pen
          .moveTo(x + box.width, at)
          .lineTo(x + box.width + 56, at)
          .lineWidth(1)
          .strokeColor(PAPER.ink)
          .stroke();
        pen.circle(x + box.width + 56, at, 2.2).fill(PAPER.ink);
        paper.setAt(`input ${input.number}`, x + box.width + 6, at - 11, 50, {
          size: 7.5,
          colour: PAPER.ink2,
        });
        const strings = input.strings
          .map((name) => {
            const s = units.get(name);
            return s ? `${name} (${s.slots.length} units, ${kindWords(s.kind)})` : name;
          })
          .join('   ');
        paper.setAt(strings, x + box.width + 66, at - 6, paper.width - box.width - 66, { size: 8.5 });
      });
      if (rows.length === 0)
        paper.setAt('no string', x + box.width + 14, y + 14, 120, { size: 8.5, colour: PAPER.ink2 });
    });
    if (spare > 0 && rows.length > 0)
      paper.text(`${inverter.name}: ${spare} ${spare === 1 ? 'input is' : 'inputs are'} free.`, {
        size: 8.5,
        colour: PAPER.ink2,
      });
  }
  paper.heading('Shutdown: initiators, zones and transmitters', 2);
  paper.table(
    [
      { header: 'Initiator', share: 2 },
      { header: 'Where', share: 3 },
      { header: 'Zone', share: 2 },
      { header: 'Strings', share: 3 },
      { header: 'Transmitters', share: 3 },
    ],
    data.zones.map((z) => [
      z.initiator,
      z.place,
      z.name,
      z.strings.join(', '),
      z.transmitters.map((t) => `${t.name}: ${t.strings.join(', ')}`).join('\n'),
    ]),
  );
  paper.heading('Loggers and gateways', 2);
  paper.table(
    [
      { header: 'Logger', share: 2 },
      { header: 'Firmware', share: 1 },
      { header: 'Gateways heard through it', share: 4 },
    ],
    data.loggers.map((l) => [l.serial, l.firmware ?? '', l.gateways.join(', ')]),
  );
}

const MOST_ROOF_HEIGHT = 300;

/** The roof from above: outline, and each string's path from its negative end. */
function roof(paper: Paper, data: PackData): void {
  const outline = (data.site.outline ?? []).map(([x, y]) => ({ x, y }));
  const paths = data.strings.map((s) => ({
    name: s.name,
    points: s.slots.flatMap((slot) => (slot.x === null || slot.y === null ? [] : [{ x: slot.x, y: slot.y }])),
  }));
  const all = [...outline, ...paths.flatMap((p) => p.points)];
  if (all.length < 2) return;
  const west = Math.min(...all.map((p) => p.x));
  const east = Math.max(...all.map((p) => p.x));
  const south = Math.min(...all.map((p) => p.y));
  const north = Math.max(...all.map((p) => p.y));
  const scale = Math.min(
    (paper.width - 40) / Math.max(1, east - west),
    MOST_ROOF_HEIGHT / Math.max(1, north - south),
  );
  const height = (north - south) * scale + 34;
  paper.heading('Roof plan', 2, height + 20);
  paper.figure(height, (left, top) => {
    const { pen } = paper;
    const at = (p: { x: number; y: number }) =>
      [left + 20 + (p.x - west) * scale, top + 14 + (north - p.y) * scale] as const;
    const line = (points: readonly { x: number; y: number }[], close: boolean): void => {
      points.forEach((p, i) => (i === 0 ? pen.moveTo(...at(p)) : pen.lineTo(...at(p))));
      if (close) pen.closePath();
    };
    if (outline.length > 2) {
      line(outline, true);
      pen.lineWidth(1.2).strokeColor(PAPER.ink).stroke();
    }
    for (const { name, points } of paths) {
      const [first] = points;
      if (!first) continue;
      line(points, false);
      pen.lineWidth(1).strokeColor(PAPER.petrol).stroke();
      for (const p of points) {
        const [x, y] = at(p);
        pen
          .moveTo(x, y - 2)
          .lineTo(x, y + 2)
          .lineWidth(0.6)
          .strokeColor(PAPER.petrol)
          .stroke();
      }
      const [x, y] = at(first);
      pen.circle(x, y, 1.8).fill(PAPER.ink);
      paper.setAt(`${name} −`, x - 24, y - 9, 22, { size: 6.5, colour: PAPER.ink2, align: 'right' });
    }
    const [x, y] = at({ x: east, y: north });
    pen
      .moveTo(x + 12, y + 12)
      .lineTo(x + 12, y - 4)
      .lineWidth(0.8)
      .strokeColor(PAPER.ink)
      .stroke();
    pen
      .moveTo(x + 9, y + 1)
      .lineTo(x + 12, y - 5)
      .lineTo(x + 15, y + 1)
      .fill(PAPER.ink);
    paper.setAt('N', x + 9, y + 13, 10, { size: 7 });
  });
  paper.text('Seen from above; each path begins at its string’s negative end, a tick is a module.', {
    size: 8.5,
    colour: PAPER.ink2,
  });
}

/** Serials in rows of four, so that a string of fourteen takes a few lines. */
const SLOTS_A_ROW = 4;

export function layout(paper: Paper, data: PackData): void {
  paper.heading('4  String layout with serials', 1, data.site.outline ? MOST_ROOF_HEIGHT : 120);
  roof(paper, data);
  for (const s of data.strings) {
    paper.heading(s.name, 2);
    const facts = [
      `${s.slots.length} units, ${kindWords(s.kind)}, ${s.unitType}`,
      `plane ${s.plane}`,
      `${s.inverter}, input ${s.input}`,
      `zone ${s.zone}`,
      s.transmitters.length > 0 ? `hears ${s.transmitters.join(', ')}` : '',
      s.logger ? `logger ${s.logger}` : '',
      s.leavesArray ? 'home run leaves the array' : 'home run stays inside the array',
    ];
    paper.text(facts.filter(Boolean).join(' · '), { size: 8.5, colour: PAPER.ink2 });
    const rows: string[][] = [];
    for (let i = 0; i < s.slots.length; i += SLOTS_A_ROW)
      rows.push(
        Array.from({ length: SLOTS_A_ROW }, (_, k) => {
          const slot = s.slots[i + k];
          if (!slot) return '';
          return `${slot.position}   ${slot.serial ?? 'no unit'}${slot.place ? `\n${slot.place}` : ''}`;
        }),
      );
    const types = [...new Set(s.slots.map((slot) => slot.moduleType))];
    paper.table(
      Array.from({ length: SLOTS_A_ROW }, (_, k) => ({
        header: k === 0 ? 'Position and serial' : '',
        share: 1,
      })),
      rows,
    );
    paper.text(`Modules: ${types.join(', ')}.`, { size: 8.5, colour: PAPER.ink2 });
  }
}

export const when = (at: string, data: PackData): string => fullTime(at, data.site.timeZone);
