import { MODULE_TYPES, UNIT_TYPES } from './catalogue';
import { HARBOURLINE_SITES, LOWFIELD_SITES, type DemoSite } from './demo-sites';
import { layOut } from './lay-out';
import { placesAtHours } from './places';
import type { FleetPlan, SitePlan } from '../plant/plan';

export const DEMO_SEED = 20_261_201;

/**
 * The demo fleet: thirteen sites of our own invention in two organisations, 60 to 1,240 units each. `since` (epoch
 * seconds) is the moment at which the demo starts afresh: each site is put where the sun then stands at the
 * hour that its story wants (the one under commissioning at mid-morning), so the fleet goes round the globe and
 * some sites are always in daylight. The same arguments give the same fleet.
 */
export function demoFleet(seed: number, since: number): FleetPlan {
  const all = [...LOWFIELD_SITES, ...HARBOURLINE_SITES];
  const places = placesAtHours(
    since,
    all.map((s) => s.hour),
  );
  const at = (demo: DemoSite): SitePlan => {
    const place = places[all.indexOf(demo)];
    if (!place) throw new Error(`The demo has no place for "${demo.spec.name}".`);
    const site = layOut(demo.spec, place, { modules: MODULE_TYPES, units: UNIT_TYPES });
    const logger = site.loggers[0]?.serial ?? '';
    // A preset fault of a gateway means the site's own logger.
    site.faults = site.faults.map((f) =>
      f.fault.kind === 'gateway_out' ? { ...f, fault: { ...f.fault, logger } } : f,
    );
    return site;
  };
  return {
    seed,
    since,
    organisations: [
      {
        name: 'Lowfield Solar Works',
        timeZone: 'Europe/London',
        phone: '+00 555 0100',
        people: [
          { email: 'manager@lowfield.example', name: 'Orla Nettlebeck', role: 'manager', sites: [] },
          { email: 'technician@lowfield.example', name: 'Bram Ottersley', role: 'technician', sites: [] },
          { email: 'analyst@lowfield.example', name: 'Sunniva Quill', role: 'analyst', sites: [] },
          {
            email: 'customer@lowfield.example',
            name: 'Linnet Ashgrove',
            role: 'customer',
            sites: ['Weirside Clinic', 'Slate Lane Library'],
          },
        ],
        moduleTypes: MODULE_TYPES,
        unitTypes: UNIT_TYPES,
        sites: LOWFIELD_SITES.map(at),
      },
      {
        name: 'Harbourline Energy',
        timeZone: 'Europe/Dublin',
        phone: '+00 555 0200',
        people: [
          { email: 'manager@harbourline.example', name: 'Tove Maddock', role: 'manager', sites: [] },
          {
            email: 'customer@harbourline.example',
            name: 'Ebba Strand',
            role: 'customer',
            sites: ['Netloft Terrace'],
          },
        ],
        moduleTypes: MODULE_TYPES,
        unitTypes: UNIT_TYPES,
        sites: HARBOURLINE_SITES.map(at),
      },
    ],
  };
}

/** One site of the demo by its name, for tests and scenarios that want a whole one. */
export function demoSite(fleet: FleetPlan, name: string): SitePlan {
  for (const o of fleet.organisations) {
    const found = o.sites.find((s) => s.name === name);
    if (found) return found;
  }
  throw new Error(`The demo has no site "${name}".`);
}
