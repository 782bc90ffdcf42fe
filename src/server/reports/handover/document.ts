import { PAPER } from '../../../drawings/paint';
import { longDate } from '../../../drawings/times';
import { Paper } from '../pdf/paper';
import type { PackData, PackTest } from './data';
import { equipment, operation } from './equipment';
import { installChecks, openPoints, testResults } from './results';
import { layout, people, singleLine, systemData } from './sections';
import { papersHandoverDocument } from '../../../words/papers-handover';

export interface PackAbout {
  version: number;
  at: Date;
  madeBy: string;
  remark: string;
  fingerprint: string;
}

const CONTENTS = [
  papersHandoverDocument.systemData,
  papersHandoverDocument.people,
  papersHandoverDocument.singleLineDescription,
  papersHandoverDocument.stringLayoutWithSerials,
  papersHandoverDocument.equipment,
  papersHandoverDocument.operationAndMaintenance,
  papersHandoverDocument.testResults,
  papersHandoverDocument.installChecks,
  papersHandoverDocument.openPoints,
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
    {
      title: papersHandoverDocument.handoverPack(site.name, about.version),
      author: site.organisation.name,
      at: about.at,
    },
    {
      head: papersHandoverDocument.handoverPackVersion(site.name, about.version, date),
      foot: papersHandoverDocument.fingerprintOfTheData(about.fingerprint),
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
  paper.text(papersHandoverDocument.handoverPack2, { size: 13, colour: PAPER.ink2 });
  paper.text(site.name, { size: 30, weight: 600, leading: 1.15 });
  if (site.place) paper.text(site.place, { size: 13, colour: PAPER.ink2 });
  paper.space(24);
  paper.facts([
    [papersHandoverDocument.version, String(about.version)],
    [papersHandoverDocument.date, date],
    [papersHandoverDocument.madeBy, `${about.madeBy}, ${site.organisation.name}`],
    [
      papersHandoverDocument.unitsStrings,
      `${strings.reduce((n, s) => n + s.slots.length, 0)}, ${strings.length}`,
    ],
    ...(about.remark ? ([[papersHandoverDocument.remark, about.remark]] as const) : []),
  ]);
  paper.space(8);
  paper.text(papersHandoverDocument.madeFromWhatPeople, { size: 9, colour: PAPER.ink2 });
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
