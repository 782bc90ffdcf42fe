import type { Simulator } from '../engine';
import { FAULT_WORDS, type FaultKind } from '../faults/kinds';
import { unitsOf } from '../plant/plan';

const ESCAPES: Record<string, string> = {
  '&': '&amp;',
  '<': '&lt;',
  '>': '&gt;',
  '"': '&quot;',
  "'": '&#39;',
};
const text = (value: string | number): string => String(value).replace(/[&<>"']/g, (c) => ESCAPES[c] ?? c);

function shell(title: string, body: string): string {
  return `<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<title>${text(title)}</title>
<link rel="stylesheet" href="/style.css">
</head>
<body>
<p class="outside"><strong>The simulated plant.</strong> This page is no part of Wakeline: these are the switches on site, and what is true there. Wakeline only watches.</p>
${body}
<script src="/script.js"></script>
</body>
</html>`;
}

/** All sites, with how many units do what. */
export function startPageHtml(simulator: Simulator): string {
  const rows = simulator.runs
    .map(({ plan, plant, loggers }) => {
      const open = [...plant.commands.initiators].filter(([, i]) => i.open).map(([name]) => name);
      const faults = plant.faults.inForce(plant.atS).length;
      const away = loggers.filter((l) => !l.connection.connected).length;
      return `<tr>
<th scope="row"><a href="/sites/${encodeURIComponent(plan.key)}">${text(plan.name)}</a></th>
<td>${text(plan.place)}</td>
<td class="n">${unitsOf(plan)}</td>
<td class="n">${plant.now.elevation > 0 ? `${Math.round(plant.now.elevation)}°` : 'night'}</td>
<td>${open.length > 0 ? text(`${open.join(', ')} open`) : 'closed'}</td>
<td class="n">${faults || 'none'}</td>
<td>${away === 0 ? 'connected' : text(loggers[0]?.connection.fault ?? 'not connected')}</td>
</tr>`;
    })
    .join('\n');
  return shell(
    'Switches of the simulated plant',
    `<h1>Switches of the simulated plant</h1>
<div class="sheet scroll"><table>
<caption>Sites</caption>
<thead><tr><th scope="col">Site</th><th scope="col">Place</th><th scope="col" class="n">Units</th><th scope="col" class="n">Sun</th><th scope="col">Initiators</th><th scope="col" class="n">Faults</th><th scope="col">Logger</th></tr></thead>
<tbody>${rows}</tbody>
</table></div>`,
  );
}

/** What each fault wants to know, in the order of the form. */
const FIELDS: Record<FaultKind, string[]> = {
  stuck: ['string', 'position', 'at'],
  not_shutting_down: ['string', 'position', 'claims'],
  unit_mute: ['string', 'position'],
  bypass_diode: ['string', 'position', 'groups'],
  wrong_string: ['string', 'position', 'otherString', 'otherPosition'],
  string_isolated: ['string'],
  connector: ['string', 'ohm'],
  soiling: ['string', 'share'],
  shade: ['string', 'positions', 'fromHour', 'toHour', 'share'],
  snow: ['plane'],
  transmitter_off: ['transmitter'],
  transmitter_unheard: ['transmitter', 'strings'],
  cross_talk: ['transmitter', 'strings', 'positions'],
  command_lost: ['zone', 'how'],
  gateway_out: ['logger', 'gateway', 'keeps'],
  uplink_out: ['logger'],
  grid_lost: ['inverter'],
  curtailed: ['inverter', 'share'],
  earth_fault: ['inverter'],
};

export function sitePage(simulator: Simulator, key: string): string {
  const run = simulator.site(key);
  if (!run) throw new Error(`There is no site "${key}".`);
  const { plan } = run;
  const select = (name: string, label: string, values: readonly (string | number)[]) =>
    `<label data-field="${name}">${label}<select name="${name}">${values.map((v) => `<option value="${text(v)}">${text(String(v).replaceAll('_', ' '))}</option>`).join('')}</select></label>`;
  const input = (name: string, label: string, value: string, hint = '') =>
    `<label data-field="${name}">${label}<input name="${name}" value="${text(value)}"${hint ? ` placeholder="${text(hint)}"` : ''}></label>`;
  const strings = plan.strings.map((s) => s.name);
  const form = [
    `<label>Fault<select name="kind">${Object.entries(FAULT_WORDS)
      .filter(([kind]) => plan.transmitters.length > 0 || !/^(transmitter|cross)/.test(kind))
      .map(
        ([kind, words]) =>
          `<option value="${kind}" data-fields="${FIELDS[kind as FaultKind].join(' ')}">${text(words)}</option>`,
      )
      .join('')}</select></label>`,
    select('string', 'String', strings),
    input('position', 'Position', '1'),
    select('at', 'From', ['next_release', 'now']),
    select('claims', 'Says of itself', ['passing', 'shutdown']),
    input('groups', 'Groups of cells', '1'),
    select('otherString', 'Other string', strings),
    input('otherPosition', 'Other position', '1'),
    input('strings', 'Strings', '', 'A1, A2'),
    input('positions', 'Positions', '', '1, 2, 3'),
    input('fromHour', 'From solar hour', '8'),
    input('toHour', 'To solar hour', '16'),
    input('ohm', 'Resistance (ohm)', '0.8'),
    input('share', 'Share (0 to 1)', '0.3'),
    select(
      'plane',
      'Plane',
      plan.planes.map((p) => p.name),
    ),
    select(
      'transmitter',
      'Transmitter',
      plan.transmitters.map((t) => t.name),
    ),
    select(
      'zone',
      'Zone',
      plan.zones.map((z) => z.name),
    ),
    select('how', 'What is lost', ['keep_alive_lost', 'power_lost']),
    select(
      'logger',
      'Logger',
      plan.loggers.map((l) => l.serial),
    ),
    select(
      'gateway',
      'Gateway',
      plan.loggers.flatMap((l) => l.gateways.map((g) => g.number)),
    ),
    select('keeps', 'Keeps what it hears', ['false', 'true']),
    select(
      'inverter',
      'Inverter',
      plan.inverters.map((i) => i.name),
    ),
  ].join('\n');
  return shell(
    `${plan.name}: switches of the simulated plant`,
    `<p><a href="/">All sites</a></p>
<h1>${text(plan.name)}</h1>
<p id="now" class="quiet"></p>
<section class="sheet" data-site="${text(plan.key)}">
<h2>Initiators</h2>
<ul class="switches">${plan.initiators
      .map(
        (i) =>
          `<li><span><strong>${text(i.name)}</strong><br><span class="quiet">${text(i.place)} · ${text(
            plan.zones
              .filter((z) => z.initiator === i.name)
              .map((z) => z.name)
              .join(', '),
          )}</span></span> <span class="state" data-state="${text(i.name)}">…</span> <button type="button" data-initiator="${text(i.name)}">…</button></li>`,
      )
      .join('')}</ul>
</section>
<section class="sheet">
<h2>Faults</h2>
<ul id="faults" class="switches"></ul>
<form id="inject">${form}<button type="submit">Put this fault in</button><p id="fault-said" role="status"></p></form>
</section>
<section class="sheet scroll">
<h2>What is true</h2>
<table><caption>Strings, from position 1 at the negative end. V at each unit’s output; hover for more.</caption>
<thead><tr><th scope="col">String</th><th scope="col" class="n">Sum</th><th scope="col" class="n">Home run</th><th scope="col" class="n">Current</th><th scope="col">Units</th></tr></thead>
<tbody id="strings"></tbody></table>
</section>`,
  );
}
