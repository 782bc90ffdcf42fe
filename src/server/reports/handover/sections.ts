import { PAPER } from '../../../drawings/paint';
import { number, quantity } from '../../../drawings/numbers';
import { fullTime, longDate } from '../../../drawings/times';
import type { Paper } from '../pdf/paper';
import type { PackData } from './data';
import { papersHandoverSections } from '../../../words/papers-handover';

/** The first half of the papers: what the system is, who worked on it, how it is laid out. */

export const RULE_SETS: Record<string, string> = {
  rapid_shutdown_30s: papersHandoverSections.rapidShutdown30S,
  rapid_shutdown_10s: papersHandoverSections.rapidShutdown10S,
  hazard_control: papersHandoverSections.aListedPvHazard,
  none: 'none',
};
const STRUCTURES: Record<string, string> = {
  one_or_two_family_dwelling: papersHandoverSections.oneOrTwoFamily,
  other_building: papersHandoverSections.otherBuilding,
  not_on_building: papersHandoverSections.notOnABuilding,
};
const KINDS: Record<string, string> = {
  shutdown_only: 'shutdown-only',
  monitored: 'monitored',
  optimizing: 'optimizing',
};
export const kindWords = (kind: string): string => KINDS[kind] ?? kind;

const temperature = (value: number | null): string =>
  value === null ? papersHandoverSections.notEntered : quantity(value, '°C');

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
  paper.heading(papersHandoverSections.n1SystemData, 1);
  const units = data.strings.reduce((n, s) => n + s.slots.length, 0);
  paper.facts([
    [papersHandoverSections.site, site.name],
    [papersHandoverSections.place, site.place],
    [
      papersHandoverSections.coordinates,
      papersHandoverSections.aboveSeaLevel(
        site.latitude.toFixed(4),
        site.longitude.toFixed(4),
        site.altitude,
      ),
    ],
    [papersHandoverSections.timesInThesePapers, site.timeZone],
    [papersHandoverSections.structure, STRUCTURES[site.structure] ?? site.structure],
    [papersHandoverSections.shutdownRuleSet, RULE_SETS[site.ruleSet] ?? site.ruleSet],
    [papersHandoverSections.shutdownSwitch, site.switchPlace],
    [
      papersHandoverSections.modules,
      papersHandoverSections.atStandardTestConditions(units, moduleCapacity(data)),
    ],
    [papersHandoverSections.strings, number(data.strings.length)],
    [
      papersHandoverSections.inverters,
      papersHandoverSections.invertersReduceAc(
        data.inverters.length,
        data.inverters.reduce((n, i) => n + i.acPowerMax, 0),
      ),
    ],
    [
      papersHandoverSections.designTemperatures,
      papersHandoverSections.coldestHottestAir(
        temperature(site.temperatureMin),
        temperature(site.temperatureMax),
      ),
    ],
    [papersHandoverSections.enteredOn, longDate(site.createdAt, site.timeZone)],
    [
      papersHandoverSections.inServiceSince,
      site.switchedOnOn ? longDate(`${site.switchedOnOn}T12:00:00Z`, 'UTC') : '',
    ],
  ]);
  paper.table(
    [
      { header: papersHandoverSections.plane, share: 2 },
      { header: papersHandoverSections.tilt, share: 1, align: 'right' },
      { header: papersHandoverSections.azimuthClockwiseFromNorth, share: 2, align: 'right' },
    ],
    data.planes.map((p) => [p.name, quantity(p.tilt, '°'), quantity(p.azimuth, '°')]),
  );
}

export function people(paper: Paper, data: PackData): void {
  const { site } = data;
  paper.heading(papersHandoverSections.n2People, 1);
  paper.facts([
    [papersHandoverSections.commissionedBy, site.organisation.name],
    [papersHandoverSections.telephone, site.organisation.phone ?? ''],
    [
      papersHandoverSections.contactForTheSite,
      [site.contactName, site.contactPhone].filter(Boolean).join(', '),
    ],
  ]);
  paper.table(
    [
      { header: papersHandoverSections.person, share: 2 },
      { header: papersHandoverSections.role, share: 1 },
      { header: papersHandoverSections.recorded, share: 4 },
    ],
    data.people.map((p) => [p.name, p.role, p.did.join(', ')]),
  );
}

/** Inverters left, their inputs as branches, the strings that hang on each. */
export function singleLine(paper: Paper, data: PackData): void {
  const first = data.inverters[0]?.inputs.filter((i) => i.strings.length > 0).length ?? 0;
  paper.heading(papersHandoverSections.n3SingleLineDescription, 1, 80 + first * 24);
  paper.text(papersHandoverSections.everyStringEndsIn);
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
        [inverter.type ?? '', papersHandoverSections.acPowerMaxAc(inverter.acPowerMax)]
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
        paper.setAt(papersHandoverSections.input(input.number), x + box.width + 6, at - 11, 50, {
          size: 7.5,
          colour: PAPER.ink2,
        });
        const strings = input.strings
          .map((name) => {
            const s = units.get(name);
            return s
              ? papersHandoverSections.nameSlotsUnitsKind(name, s.slots.length, kindWords(s.kind))
              : name;
          })
          .join('   ');
        paper.setAt(strings, x + box.width + 66, at - 6, paper.width - box.width - 66, { size: 8.5 });
      });
      if (rows.length === 0)
        paper.setAt(papersHandoverSections.noString, x + box.width + 14, y + 14, 120, {
          size: 8.5,
          colour: PAPER.ink2,
        });
    });
    if (spare > 0 && rows.length > 0)
      paper.text(papersHandoverSections.inverterSpareFree(inverter.name, spare), {
        size: 8.5,
        colour: PAPER.ink2,
      });
  }
  paper.heading(papersHandoverSections.shutdownInitiatorsZonesAnd, 2);
  paper.table(
    [
      { header: papersHandoverSections.initiator, share: 2 },
      { header: papersHandoverSections.where, share: 3 },
      { header: papersHandoverSections.zone, share: 2 },
      { header: papersHandoverSections.strings, share: 3 },
      { header: papersHandoverSections.transmitters, share: 3 },
    ],
    data.zones.map((z) => [
      z.initiator,
      z.place,
      z.name,
      z.strings.join(', '),
      z.transmitters.map((t) => `${t.name}: ${t.strings.join(', ')}`).join('\n'),
    ]),
  );
  paper.heading(papersHandoverSections.loggersAndGateways, 2);
  paper.table(
    [
      { header: papersHandoverSections.logger, share: 2 },
      { header: papersHandoverSections.firmware, share: 1 },
      { header: papersHandoverSections.gatewaysHeardThroughIt, share: 4 },
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
  paper.heading(papersHandoverSections.roofPlan, 2, height + 20);
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
  paper.text(papersHandoverSections.seenFromAboveEach, {
    size: 8.5,
    colour: PAPER.ink2,
  });
}

/** Serials in rows of four, so that a string of fourteen takes a few lines. */
const SLOTS_A_ROW = 4;

export function layout(paper: Paper, data: PackData): void {
  paper.heading(papersHandoverSections.n4StringLayoutWith, 1, data.site.outline ? MOST_ROOF_HEIGHT : 120);
  roof(paper, data);
  for (const s of data.strings) {
    paper.heading(s.name, 2);
    const facts = [
      papersHandoverSections.slotsUnitsKindUnitType(s.slots.length, kindWords(s.kind), s.unitType),
      papersHandoverSections.planeWords(s.plane),
      papersHandoverSections.inverterInput(s.inverter, s.input),
      papersHandoverSections.zoneWords(s.zone),
      s.transmitters.length > 0 ? papersHandoverSections.hearsTransmitters(s.transmitters.join(', ')) : '',
      s.logger ? papersHandoverSections.loggerWords(s.logger) : '',
      s.leavesArray ? papersHandoverSections.homeRunLeavesThe : papersHandoverSections.homeRunStaysInside,
    ];
    paper.text(facts.filter(Boolean).join(' · '), { size: 8.5, colour: PAPER.ink2 });
    const rows: string[][] = [];
    for (let i = 0; i < s.slots.length; i += SLOTS_A_ROW)
      rows.push(
        Array.from({ length: SLOTS_A_ROW }, (_, k) => {
          const slot = s.slots[i + k];
          if (!slot) return '';
          return `${slot.position}   ${slot.serial ?? papersHandoverSections.noUnit}${slot.place ? `\n${slot.place}` : ''}`;
        }),
      );
    const types = [...new Set(s.slots.map((slot) => slot.moduleType))];
    paper.table(
      Array.from({ length: SLOTS_A_ROW }, (_, k) => ({
        header: k === 0 ? papersHandoverSections.positionAndSerial : '',
        share: 1,
      })),
      rows,
    );
    paper.text(papersHandoverSections.modulesTypes(types.join(', ')), { size: 8.5, colour: PAPER.ink2 });
  }
}

export const when = (at: string, data: PackData): string => fullTime(at, data.site.timeZone);
