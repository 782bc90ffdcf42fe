import { PAPER } from '../../../drawings/paint';
import { longDate } from '../../../drawings/times';
import { Paper } from '../pdf/paper';
import type { PackData, PackTest } from './data';
import { equipment, operation } from './equipment';
import { installChecks, openPoints, testResults } from './results';
import { layout, people, singleLine, systemData } from './sections';

export interface PackAbout {
  version: number;
  at: Date;
  madeBy: string;
  remark: string;
  fingerprint: string;
}

const CONTENTS = [
  'System data',
  'People',
  'Single-line description',
  'String layout with serials',
  'Equipment',
  'Operation and maintenance',
  'Test results',
  'Install checks',
  'Open points',
];

/**
 * The handover pack as PDF, under the headings of IEC 62446-1 (documentation, commissioning tests and inspection).
 * @param photos JPEG or PNG by the photo's identifier
 */
export async function handoverPdf(
  data: PackData,
  about: PackAbout,
  extra: { tests: readonly PackTest[]; design: readonly string[]; photos: ReadonlyMap<string, Buffer> },
): Promise<Buffer> {
  const { site } = data;
  const date = longDate(about.at, site.timeZone);
  const paper = new Paper(
    { title: `${site.name}: handover pack ${about.version}`, author: site.organisation.name, at: about.at },
    {
      head: `${site.name} · handover pack, version ${about.version} · ${date}`,
      foot: `Fingerprint of the data (SHA-256) ${about.fingerprint}`,
    },
  );
  cover(paper, data, about, date);
  systemData(paper, data);
  people(paper, data);
  singleLine(paper, data);
  layout(paper, data);
  equipment(paper, data);
  operation(paper, data);
  testResults(paper, data, extra.tests);
  installChecks(paper, data, extra.photos);
  openPoints(paper, data, extra.design);
  return paper.end();
}

function cover(paper: Paper, { site, strings }: PackData, about: PackAbout, date: string): void {
  paper.space(40);
  staircaseMark(paper);
  paper.space(20);
  paper.text('Handover pack', { size: 13, colour: PAPER.ink2 });
  paper.text(site.name, { size: 30, weight: 600, leading: 1.15 });
  if (site.place) paper.text(site.place, { size: 13, colour: PAPER.ink2 });
  paper.space(24);
  paper.facts([
    ['Version', String(about.version)],
    ['Date', date],
    ['Made by', `${about.madeBy}, ${site.organisation.name}`],
    ['Units, strings', `${strings.reduce((n, s) => n + s.slots.length, 0)}, ${strings.length}`],
    ...(about.remark ? ([['Remark', about.remark]] as const) : []),
  ]);
  paper.space(8);
  paper.text(
    'Made from what people recorded on site and what loggers reported. The fingerprint at the foot of every page belongs to that data: a pack with another fingerprint says something else. The headings follow IEC 62446-1; whether they satisfy it here is for the authority having jurisdiction to say.',
    { size: 9, colour: PAPER.ink2 },
  );
  paper.space(16);
  CONTENTS.forEach((name, i) => paper.text(`${i + 1}   ${name}`, { size: 10.5, leading: 1.15 }));
  paper.newPage();
}

/** The product's mark: a staircase with one step missing. */
function staircaseMark(paper: Paper): void {
  paper.figure(44, (x, y) => {
    const { pen } = paper;
    pen.save().translate(x, y).scale(1.7);
    pen.path('M1.5 21.5H7v-6h5V11h4.5V6H20V2').lineWidth(2.5).strokeColor(PAPER.ink).stroke();
    pen.rect(12.5, 16.5, 6.5, 5).fill(PAPER.rust);
    pen.restore();
  });
}
