import { CASE_KIND_WORDS, CASE_STATE_WORDS, CHECK_OUTCOME_WORDS } from '../../../domain/cases/cases';
import { CHECKLIST_SOURCE, checklistItem, checklistOf } from '../../../domain/cases/checklists';
import { KIND_WORDS, STAGE_WORDS } from '../../../domain/commissioning/readings/stages';
import { eventWords } from '../../../domain/verdicts/event-words';
import { comparedFigures, partsInWords } from '../../../drawings/case-figures';
import { volts } from '../../../drawings/numbers';
import { PAPER } from '../../../drawings/paint';
import { fullTime, longDate } from '../../../drawings/times';
import { kindWords, RULE_SETS } from '../handover/sections';
import { Paper } from '../pdf/paper';
import type { Evidence, EvidenceAbout, EvidenceString } from './data';
import type { PaperDrawing } from './drawings';

/** What is drawn, by the string's public identifier. */
export interface EvidenceDrawings {
  before: ReadonlyMap<string, PaperDrawing>;
  after: ReadonlyMap<string, PaperDrawing>;
  day: ReadonlyMap<string, PaperDrawing>;
  week: ReadonlyMap<string, PaperDrawing>;
}

const CAUTION = [
  'Strings stay dangerous in light.',
  'Shutdown is not isolation: each module and its leads to its unit stay at module voltage. Never open a connector under load. Isolate, lock out, prove dead with a rated meter; licensed or qualified people, local code first. These papers say what was reported and recorded, not what stands on the conductors now.',
] as const;

/**
 * The evidence of a case as PDF, for whoever is called next.
 * @param photos JPEG by the photo's identifier
 */
export async function evidencePdf(
  data: Evidence,
  about: EvidenceAbout,
  drawings: EvidenceDrawings,
  photos: ReadonlyMap<string, Buffer>,
): Promise<Buffer> {
  const c = data.case;
  const date = longDate(about.at, c.timeZone);
  const paper = new Paper(
    { title: `Case ${c.number}: ${c.title}`, author: data.organisation.name, at: about.at },
    {
      head: `${c.siteName} · evidence of case ${c.number} · ${date}`,
      foot: `Fingerprint of the data (SHA-256) ${about.fingerprint}`,
    },
  );
  cover(paper, data, about);
  figures(paper, data, drawings);
  for (const string of data.strings) stringSheet(paper, string, c.timeZone, drawings);
  meterReadings(paper, data);
  events(paper, data);
  checklist(paper, data);
  history(paper, data);
  photoPages(paper, data, photos);
  return paper.end();
}

function cover(paper: Paper, data: Evidence, about: EvidenceAbout): void {
  const c = data.case;
  paper.text(`Evidence of case ${c.number}`, { size: 13, colour: PAPER.ink2 });
  paper.text(c.title, { size: 24, weight: 600, leading: 1.15 });
  paper.space(8);
  paper.caution(...CAUTION);
  paper.space(6);
  paper.facts([
    ['Site', [c.siteName, data.place].filter(Boolean).join(', ')],
    ['At the site', [data.contact.name, data.contact.phone].filter(Boolean).join(', ')],
    ['Looked after by', [data.organisation.name, data.organisation.phone].filter(Boolean).join(', ')],
    [
      'What it is about',
      partsInWords(
        c.parts,
        c.strings.map((s) => s.name),
      ) || 'the site as a whole',
    ],
    ['Kind', CASE_KIND_WORDS[c.kind]],
    ...(c.cause ? ([['Cause', `${c.cause.headline}${c.cause.open ? '' : ' (over by now)'}`]] as const) : []),
    [
      'State',
      `${CASE_STATE_WORDS[c.state]}${c.outcome ? `; looked at again: ${CHECK_OUTCOME_WORDS[c.outcome]}` : ''}`,
    ],
    ['Opened', `${fullTime(c.openedAt, c.timeZone)}, ${c.openedBy || 'Wakeline'}`],
    ['Assigned to', c.assignee?.name ?? 'nobody yet'],
    ['Due', c.dueOn ? longDate(`${c.dueOn}T12:00:00Z`, 'UTC') : 'no day'],
    ['Shutdown rule set', RULE_SETS[data.ruleSet] ?? data.ruleSet],
    ['Times in these papers', c.timeZone],
    ['Put together', `${fullTime(about.at, c.timeZone)}, ${about.madeBy}`],
  ]);
  paper.heading('What is wrong', 2);
  paper.text(c.what || 'Nothing is written down.');
}

function drawing(paper: Paper, picture: PaperDrawing | undefined, words: string): void {
  if (!picture) return;
  const height = paper.width * picture.ratio;
  paper.need(height + 26);
  paper.text(words, { size: 9, colour: PAPER.ink2 });
  paper.figure(height + 8, (x, y) => paper.pen.image(picture.png, x, y, { width: paper.width }));
}

function figures(paper: Paper, data: Evidence, drawings: EvidenceDrawings): void {
  const { before, after, timeZone } = data.case;
  if (!before) return;
  paper.heading('Figures', 1);
  paper.table(
    [
      { header: '', share: 1 },
      { header: 'Figure', share: 2 },
      { header: `When opened, ${fullTime(before.at, timeZone)}`, share: 3 },
      ...(after ? [{ header: `Looked at again, ${fullTime(after.at, timeZone)}`, share: 3 }] : []),
    ],
    comparedFigures(before, after).map((l) => [
      l.subject,
      l.figure,
      l.before,
      ...(after ? [l.after ?? ''] : []),
    ]),
  );
  for (const s of before.strings) {
    drawing(
      paper,
      drawings.before.get(s.id),
      `String ${s.name} when the case was opened: volts along its positions, the expected staircase dotted, what is assumed from a claim dashed.`,
    );
    drawing(paper, drawings.after.get(s.id), `String ${s.name} when it was looked at again.`);
  }
}

function stringSheet(
  paper: Paper,
  { id, name, built, day, week }: EvidenceString,
  timeZone: string,
  drawings: EvidenceDrawings,
): void {
  paper.heading(`String ${name}`, 1);
  paper.facts([
    ['Units', `${built.slots.length} × ${built.unitType} (${kindWords(built.kind)})`],
    ['Modules', [...new Set(built.slots.map((s) => s.moduleType))].join(', ')],
    ['Plane', built.plane],
    ['Home run ends at', `${built.inverter}, input ${built.input}`],
    ['Zone', built.zone],
    ['Transmitters heard', built.transmitters.join(', ') || 'none entered'],
    ['Logger', built.logger ?? 'none'],
    ['Home run leaves the array', built.leavesArray ? 'yes' : 'no'],
  ]);
  paper.heading('As built', 2);
  paper.table(
    [
      { header: 'Position', share: 1, align: 'right' },
      { header: 'Serial', share: 3 },
      { header: 'Module', share: 3 },
      { header: 'Place', share: 3 },
    ],
    built.slots.map((s) => [String(s.position), s.serial ?? 'no unit', s.moduleType, s.place]),
    'no positions entered',
  );
  const key =
    'Measured in colour, the expected band behind, other strings of the plane dashed, events dotted.';
  drawing(paper, drawings.day.get(id), `Volts on ${longDate(new Date(day.from * 1000), timeZone)}. ${key}`);
  drawing(
    paper,
    drawings.week.get(id),
    `Watts over the seven days up to ${longDate(new Date((week.to - 1) * 1000), timeZone)}. ${key}`,
  );
  for (const note of new Set([...day.notes, ...week.notes]))
    paper.text(note, { size: 9, colour: PAPER.ink2 });
}

function meterReadings(paper: Paper, data: Evidence): void {
  paper.heading('Meter readings on record', 1);
  const { timeZone } = data.case;
  paper.table(
    [
      { header: 'String', share: 1 },
      { header: 'When', share: 2 },
      { header: 'Between', share: 2 },
      { header: 'Reading', share: 1, align: 'right' },
      { header: 'What it means', share: 4 },
      { header: 'By', share: 2 },
    ],
    data.meterReadings.map((r) => [
      r.string,
      fullTime(r.at, timeZone),
      `${KIND_WORDS[r.kind as keyof typeof KIND_WORDS] ?? r.kind}, ${STAGE_WORDS[r.stage as keyof typeof STAGE_WORDS] ?? r.stage}`,
      volts(r.voltage),
      r.finding?.headline ?? '',
      r.person,
    ]),
    'No meter reading of these strings was recorded.',
  );
}

function events(paper: Paper, data: Evidence): void {
  paper.heading('Events', 1);
  const { timeZone } = data.case;
  paper.table(
    [
      { header: 'When', share: 2 },
      { header: 'String', share: 1 },
      { header: 'What', share: 6 },
    ],
    data.events.map((e) => [
      fullTime(e.at, timeZone),
      e.stringName ?? '',
      eventWords(e.kind, e.detail).words,
    ]),
    'No event in the two weeks around the opening.',
  );
}

function checklist(paper: Paper, data: Evidence): void {
  paper.heading('Checklist as done', 1);
  const { kind, checklist: marks, timeZone } = data.case;
  const own = checklistOf(kind);
  const others = marks.flatMap((m) =>
    own.some((i) => i.key === m.key) || !m.done ? [] : (checklistItem(m.key) ?? []),
  );
  paper.table(
    [
      { header: 'Looked at', share: 1 },
      { header: 'What', share: 5 },
      { header: 'Who and when', share: 3 },
      { header: 'What was seen', share: 4 },
    ],
    [...own, ...others].map((item) => {
      const mark = marks.find((m) => m.key === item.key);
      return [
        mark?.done ? 'yes' : 'not yet',
        item.check,
        mark?.done ? `${mark.by}, ${fullTime(mark.at, timeZone)}` : '',
        mark?.note ?? '',
      ];
    }),
  );
  paper.text(CHECKLIST_SOURCE, { size: 9, colour: PAPER.ink2 });
}

function history(paper: Paper, data: Evidence): void {
  paper.heading('What was written and found', 1);
  const { timeZone } = data.case;
  const told = data.entries.filter((e) => e.body !== '' && e.kind !== 'checklist');
  if (told.length === 0) paper.text('Nothing was written yet.', { colour: PAPER.ink2 });
  for (const entry of told) {
    paper.need(40);
    paper.text(`${entry.person ?? 'Wakeline'}, ${fullTime(entry.at, timeZone)}`, {
      size: 9,
      colour: PAPER.ink2,
      leading: 1.1,
    });
    const lines = Array.isArray(entry.detail.lines) ? entry.detail.lines.map(String) : [];
    paper.text([entry.body, ...lines].join('\n'));
  }
}

/** Two photos a row, each with its words. */
function photoPages(paper: Paper, data: Evidence, photos: ReadonlyMap<string, Buffer>): void {
  if (data.photos.length === 0) return;
  paper.heading('Photos', 1, 260);
  const gap = 14;
  const width = (paper.width - gap) / 2;
  const height = width * 0.75;
  for (let i = 0; i < data.photos.length; i += 2)
    paper.figure(height + 40, (left, y) => {
      data.photos.slice(i, i + 2).forEach((photo, k) => {
        const x = left + k * (width + gap);
        const bytes = photos.get(photo.id);
        if (bytes) paper.pen.image(bytes, x, y, { fit: [width, height], align: 'center', valign: 'center' });
        paper.setAt(
          `${photo.note || photo.name}, ${photo.person}, ${fullTime(photo.at, data.case.timeZone)}`.slice(
            0,
            120,
          ),
          x,
          y + height + 4,
          width,
          { size: 8, colour: PAPER.ink2 },
        );
      });
    });
}
