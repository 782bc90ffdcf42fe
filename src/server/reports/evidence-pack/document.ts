import { CASE_KIND_WORDS, CASE_STATE_WORDS, CHECK_OUTCOME_WORDS } from '../../../words/domain-cases';
import { checklistItem, checklistOf } from '../../../domain/cases/checklists';
import { CHECKLIST_SOURCE } from '../../../words/domain-checklists';
import { KIND_WORDS, STAGE_WORDS } from '../../../words/domain-reading-stages';
import { eventWords } from '../../../domain/verdicts/event-words';
import { comparedFigures, partsInWords } from '../../../drawings/case-figures';
import { volts } from '../../../drawings/numbers';
import { PAPER } from '../../../drawings/paint';
import { fullTime, longDate } from '../../../drawings/times';
import { kindWords, RULE_SETS } from '../handover/sections';
import { Paper } from '../pdf/paper';
import type { Evidence, EvidenceAbout, EvidenceString } from './data';
import type { PaperDrawing } from './drawings';
import { stringRows } from './string-rows';
import { papersEvidenceDocument } from '../../../words/papers-evidence';

/** What is drawn, by the string's public identifier. */
export interface EvidenceDrawings {
  before: ReadonlyMap<string, PaperDrawing>;
  after: ReadonlyMap<string, PaperDrawing>;
  day: ReadonlyMap<string, PaperDrawing>;
  week: ReadonlyMap<string, PaperDrawing>;
}

const CAUTION = [
  papersEvidenceDocument.stringsStayDangerousIn,
  papersEvidenceDocument.shutdownIsNotIsolation,
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
    {
      title: papersEvidenceDocument.caseNTitle(c.number, c.title),
      author: data.organisation.name,
      at: about.at,
    },
    {
      head: papersEvidenceDocument.evidenceOfCase(c.siteName, c.number, date),
      foot: papersEvidenceDocument.fingerprintOfTheData(about.fingerprint),
    },
  );
  cover(paper, data, about);
  figures(paper, data, drawings);
  allStrings(paper, data);
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
  paper.text(papersEvidenceDocument.evidenceOfCase2(c.number), { size: 13, colour: PAPER.ink2 });
  paper.text(c.title, { size: 24, weight: 600, leading: 1.15 });
  paper.space(8);
  paper.caution(...CAUTION);
  paper.space(6);
  paper.facts([
    [papersEvidenceDocument.site, [c.siteName, data.place].filter(Boolean).join(', ')],
    [papersEvidenceDocument.atTheSite, [data.contact.name, data.contact.phone].filter(Boolean).join(', ')],
    [
      papersEvidenceDocument.lookedAfterBy,
      [data.organisation.name, data.organisation.phone].filter(Boolean).join(', '),
    ],
    [
      papersEvidenceDocument.whatItIsAbout,
      partsInWords(
        c.parts,
        c.strings.map((s) => s.name),
      ) || papersEvidenceDocument.theSiteAsA,
    ],
    [papersEvidenceDocument.kind, CASE_KIND_WORDS[c.kind]],
    ...(c.cause
      ? ([
          [
            papersEvidenceDocument.cause,
            `${c.cause.headline}${c.cause.open ? '' : papersEvidenceDocument.overByNow}`,
          ],
        ] as const)
      : []),
    [
      papersEvidenceDocument.state,
      `${CASE_STATE_WORDS[c.state]}${c.outcome ? papersEvidenceDocument.lookedAtAgain(CHECK_OUTCOME_WORDS[c.outcome]) : ''}`,
    ],
    [papersEvidenceDocument.opened, `${fullTime(c.openedAt, c.timeZone)}, ${c.openedBy || 'Wakeline'}`],
    [papersEvidenceDocument.assignedTo, c.assignee?.name ?? papersEvidenceDocument.nobodyYet],
    [
      papersEvidenceDocument.due,
      c.dueOn ? longDate(`${c.dueOn}T12:00:00Z`, 'UTC') : papersEvidenceDocument.noDay,
    ],
    [papersEvidenceDocument.shutdownRuleSet, RULE_SETS[data.ruleSet] ?? data.ruleSet],
    [papersEvidenceDocument.timesInThesePapers, c.timeZone],
    [papersEvidenceDocument.putTogether, `${fullTime(about.at, c.timeZone)}, ${about.madeBy}`],
  ]);
  paper.heading(papersEvidenceDocument.whatIsWrong, 2);
  paper.text(c.what || papersEvidenceDocument.nothingIsWrittenDown);
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
  paper.heading(papersEvidenceDocument.figures, 1);
  paper.table(
    [
      { header: '', share: 1 },
      { header: papersEvidenceDocument.figure, share: 2 },
      { header: papersEvidenceDocument.whenOpened(before.at, timeZone), share: 3 },
      ...(after ? [{ header: papersEvidenceDocument.lookedAtAgain2(after.at, timeZone), share: 3 }] : []),
    ],
    comparedFigures(before, after).map((l) => [
      l.subject,
      l.figure,
      l.before,
      ...(after ? [l.after ?? ''] : []),
    ]),
  );
  for (const s of before.strings) {
    drawing(paper, drawings.before.get(s.id), papersEvidenceDocument.stringWhenTheCase(s.name));
    drawing(paper, drawings.after.get(s.id), papersEvidenceDocument.stringWhenItWas(s.name));
  }
}

function allStrings(paper: Paper, data: Evidence): void {
  if (data.strings.length < 2) return;
  const { words, columns, rows } = stringRows(data);
  paper.heading(papersEvidenceDocument.theStringsOfThis(data.strings.length), 1);
  if (words) paper.text(words);
  paper.table(columns, rows);
}

function stringSheet(
  paper: Paper,
  { id, name, built, drawn }: EvidenceString,
  timeZone: string,
  drawings: EvidenceDrawings,
): void {
  if (!drawn) return;
  const { day, week } = drawn;
  paper.heading(papersEvidenceDocument.stringName(name), 1);
  paper.facts([
    [papersEvidenceDocument.units, `${built.slots.length} × ${built.unitType} (${kindWords(built.kind)})`],
    [papersEvidenceDocument.modules, [...new Set(built.slots.map((s) => s.moduleType))].join(', ')],
    [papersEvidenceDocument.plane, built.plane],
    [
      papersEvidenceDocument.homeRunEndsAt,
      papersEvidenceDocument.inverterInputInput(built.inverter, built.input),
    ],
    [papersEvidenceDocument.zone, built.zone],
    [
      papersEvidenceDocument.transmittersHeard,
      built.transmitters.join(', ') || papersEvidenceDocument.noneEntered,
    ],
    [papersEvidenceDocument.logger, built.logger ?? 'none'],
    [papersEvidenceDocument.homeRunLeavesThe, built.leavesArray ? 'yes' : 'no'],
  ]);
  paper.heading(papersEvidenceDocument.asBuilt, 2);
  paper.table(
    [
      { header: papersEvidenceDocument.position, share: 1, align: 'right' },
      { header: papersEvidenceDocument.serial, share: 3 },
      { header: papersEvidenceDocument.module, share: 3 },
      { header: papersEvidenceDocument.place, share: 3 },
    ],
    built.slots.map((s) => [
      String(s.position),
      s.serial ?? papersEvidenceDocument.noUnit,
      s.moduleType,
      s.place,
    ]),
    papersEvidenceDocument.noPositionsEntered,
  );
  const key = papersEvidenceDocument.measuredInColourThe;
  drawing(
    paper,
    drawings.day.get(id),
    papersEvidenceDocument.voltsOn(longDate(new Date(day.from * 1000), timeZone), key),
  );
  drawing(
    paper,
    drawings.week.get(id),
    papersEvidenceDocument.wattsOverTheSeven(longDate(new Date((week.to - 1) * 1000), timeZone), key),
  );
  for (const note of new Set([...day.notes, ...week.notes]))
    paper.text(note, { size: 9, colour: PAPER.ink2 });
}

function meterReadings(paper: Paper, data: Evidence): void {
  paper.heading(papersEvidenceDocument.meterReadingsOnRecord, 1);
  const { timeZone } = data.case;
  paper.table(
    [
      { header: papersEvidenceDocument.string, share: 1 },
      { header: papersEvidenceDocument.when, share: 2 },
      { header: papersEvidenceDocument.between, share: 2 },
      { header: papersEvidenceDocument.reading, share: 1, align: 'right' },
      { header: papersEvidenceDocument.whatItMeans, share: 4 },
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
    papersEvidenceDocument.noMeterReadingOf,
  );
}

function events(paper: Paper, data: Evidence): void {
  paper.heading(papersEvidenceDocument.events, 1);
  const { timeZone } = data.case;
  paper.table(
    [
      { header: papersEvidenceDocument.when, share: 2 },
      { header: papersEvidenceDocument.string, share: 1 },
      { header: papersEvidenceDocument.what, share: 6 },
    ],
    data.events.map((e) => [
      fullTime(e.at, timeZone),
      e.stringName ?? '',
      eventWords(e.kind, e.detail).words,
    ]),
    papersEvidenceDocument.noEventInThe,
  );
}

function checklist(paper: Paper, data: Evidence): void {
  paper.heading(papersEvidenceDocument.checklistAsDone, 1);
  const { kind, checklist: marks, timeZone } = data.case;
  const own = checklistOf(kind);
  const others = marks.flatMap((m) =>
    own.some((i) => i.key === m.key) || !m.done ? [] : (checklistItem(m.key) ?? []),
  );
  paper.table(
    [
      { header: papersEvidenceDocument.lookedAt, share: 1 },
      { header: papersEvidenceDocument.what, share: 5 },
      { header: papersEvidenceDocument.whoAndWhen, share: 3 },
      { header: papersEvidenceDocument.whatWasSeen, share: 4 },
    ],
    [...own, ...others].map((item) => {
      const mark = marks.find((m) => m.key === item.key);
      return [
        mark?.done ? 'yes' : papersEvidenceDocument.notYet,
        item.check,
        mark?.done ? `${mark.by}, ${fullTime(mark.at, timeZone)}` : '',
        mark?.note ?? '',
      ];
    }),
  );
  paper.text(CHECKLIST_SOURCE, { size: 9, colour: PAPER.ink2 });
}

function history(paper: Paper, data: Evidence): void {
  paper.heading(papersEvidenceDocument.whatWasWrittenAnd, 1);
  const { timeZone } = data.case;
  const told = data.entries.filter((e) => e.body !== '' && e.kind !== 'checklist');
  if (told.length === 0) paper.text(papersEvidenceDocument.nothingWasWrittenYet, { colour: PAPER.ink2 });
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
  paper.heading(papersEvidenceDocument.photos, 1, 260);
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
