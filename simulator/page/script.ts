/** Runs in the browser: asks for the truth each second, works the switches. */
export const PAGE_SCRIPT = `
const section = document.querySelector('[data-site]');
const site = section && section.dataset.site;
const call = async (path, method, body) => {
  const reply = await fetch(path, { method, headers: { 'content-type': 'application/json' }, body: body === undefined ? undefined : JSON.stringify(body) });
  const answer = await reply.json();
  if (!reply.ok) throw new Error((answer.field ? answer.field + ': ' : '') + answer.title);
  return answer;
};
const WORDS = { at: 'from the', otherString: 'and string', otherPosition: 'position', fromHour: 'from hour', toHour: 'to hour', claims: 'says', how: '', keeps: 'keeps what it hears:' };
const say = (v) => v === 'next_release' ? 'next release on' : v === 'now' ? 'start' : Array.isArray(v) ? v.join(' ') : String(v).replaceAll('_', ' ');
const base = '/api/sites/' + encodeURIComponent(site || '');
const element = (tag, className, content) => { const e = document.createElement(tag); if (className) e.className = className; e.textContent = content; return e; };

function showInitiators(truth) {
  for (const i of truth.initiators) {
    const state = document.querySelector('[data-state="' + CSS.escape(i.name) + '"]');
    const button = document.querySelector('[data-initiator="' + CSS.escape(i.name) + '"]');
    state.textContent = i.open ? 'open since ' + new Date(i.since * 1000).toLocaleTimeString() : 'closed';
    button.textContent = i.open ? 'Close ' + i.name : 'Open ' + i.name;
    button.dataset.open = String(i.open);
  }
}
function showFaults(truth) {
  const list = document.getElementById('faults');
  const key = JSON.stringify(truth.faults);
  if (list.dataset.key === key) return;
  list.dataset.key = key;
  list.replaceChildren(...truth.faults.map((f) => {
    const { kind, ...where } = f.fault;
    const li = document.createElement('li');
    const words = document.querySelector('option[value="' + kind + '"]');
    li.append(element('span', '', (words ? words.textContent : kind) + ' · ' + Object.entries(where).map(([k, v]) => WORDS[k] === undefined ? k + ' ' + say(v) : (WORDS[k] + ' ' + say(v)).trim()).join(', ')));
    const button = element('button', '', 'Clear');
    button.type = 'button';
    button.dataset.clear = f.id;
    li.append(button);
    return li;
  }));
  if (truth.faults.length === 0) list.append(element('li', 'quiet', 'No fault is in the plant.'));
}
function showStrings(truth) {
  const units = new Map();
  for (const u of truth.units) { const list = units.get(u.string) || []; list.push(u); units.set(u.string, list); }
  document.getElementById('strings').replaceChildren(...truth.strings.map((s) => {
    const row = document.createElement('tr');
    const name = element('th', '', s.name);
    name.scope = 'row';
    const cell = document.createElement('td');
    const box = element('div', 'units', '');
    for (const u of units.get(s.name) || []) {
      const moved = u.seat.string !== u.string || u.seat.position !== u.position;
      const unit = element('span', 'unit ' + u.mode + (u.heard ? '' : ' unheard') + (moved ? ' odd' : ''), u.voltageOut.toFixed(1));
      unit.title = u.string + '-' + u.position + ' · ' + u.serial + ' · ' + u.mode + (u.heard ? '' : ', not heard yet') + (moved ? ' · sits at ' + u.seat.string + '-' + u.seat.position : '');
      box.append(unit);
    }
    cell.append(box);
    row.append(name, element('td', 'n', s.voltage.toFixed(1) + ' V'), element('td', 'n', s.homeRun.toFixed(1) + ' V'), element('td', 'n', s.current.toFixed(2) + ' A'), cell);
    return row;
  }));
}
async function refresh() {
  try {
    const truth = await call('/api/truth/' + encodeURIComponent(site), 'GET');
    document.getElementById('now').textContent = new Date(truth.at * 1000).toISOString().replace('T', ' ').slice(0, 19) + ' UTC · sun at ' + truth.sunElevation.toFixed(0) + '°';
    showInitiators(truth);
    showFaults(truth);
    showStrings(truth);
  } catch (error) {
    document.getElementById('now').textContent = 'Not live: ' + error.message;
  }
}
function showFields() {
  const form = document.getElementById('inject');
  const wanted = form.elements.kind.selectedOptions[0].dataset.fields.split(' ');
  for (const label of form.querySelectorAll('[data-field]')) label.hidden = !wanted.includes(label.dataset.field);
}
const NUMBERS = ['position', 'otherPosition', 'groups', 'ohm', 'share', 'fromHour', 'toHour', 'gateway'];
if (site) {
  document.addEventListener('click', async (event) => {
    const button = event.target.closest('button');
    if (!button) return;
    try {
      if (button.dataset.initiator) await call(base + '/initiators/' + encodeURIComponent(button.dataset.initiator), 'POST', { open: button.dataset.open !== 'true' });
      else if (button.dataset.clear) await call(base + '/faults/' + encodeURIComponent(button.dataset.clear), 'DELETE');
      else return;
    } catch (error) { document.getElementById('fault-said').textContent = error.message; }
    refresh();
  });
  const form = document.getElementById('inject');
  form.addEventListener('change', showFields);
  form.addEventListener('submit', async (event) => {
    event.preventDefault();
    const body = { kind: form.elements.kind.value };
    for (const label of form.querySelectorAll('[data-field]:not([hidden])')) {
      const field = label.dataset.field;
      const value = form.elements[field].value.trim();
      if (value === '') continue;
      body[field] = field === 'strings' ? value.split(/[ ,]+/) : field === 'positions' ? value.split(/[ ,]+/).map(Number) : field === 'keeps' ? value === 'true' : NUMBERS.includes(field) ? Number(value) : value;
    }
    const said = document.getElementById('fault-said');
    try { await call(base + '/faults', 'POST', body); said.textContent = 'It is in.'; }
    catch (error) { said.textContent = error.message; }
    refresh();
  });
  showFields();
  refresh();
  setInterval(refresh, 1000);
}
`;
