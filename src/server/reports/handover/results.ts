import { groupedBy } from '../../../domain/grouped-by';
import { CHECKS } from '../../../domain/commissioning/checks/list';
import type { CheckDefinition } from '../../../domain/commissioning/checks/definition';
import { number, quantity, volts } from '../../../drawings/numbers';
import { PAPER } from '../../../drawings/paint';
import { longDate } from '../../../drawings/times';
import type { Paper } from '../pdf/paper';
import type { PackData, PackTest } from './data';
import { when } from './sections';
import { papersHandoverResults } from '../../../words/papers-handover';

/** The second half of the papers: what was measured, looked at, tested, and what stands open. */

const STAGES: Record<string, string> = {
  before_energising: papersHandoverResults.beforeEnergising,
  after_keep_alive: papersHandoverResults.afterKeepAlive,
  after_roll_call: papersHandoverResults.afterTheRollCall,
};
const OUTCOMES: Record<string, string> = {
  as_expected: papersHandoverResults.asExpected,
  finding: papersHandoverResults.notAsExpected,
  cant_tell: papersHandoverResults.cantTellMoreThan,
  proves_nothing: papersHandoverResults.provesNothingInThis,
};
export const RESULTS: Record<string, string> = {
  passed: 'passed',
  failed: papersHandoverResults.notPassed,
  consistent: papersHandoverResults.consistentReportsAgreeNot,
  not_witnessed: papersHandoverResults.notWitnessed,
};
const CHECK_RESULTS: Record<string, string> = {
  pass: 'pass',
  fail: 'FAIL',
  not_applicable: papersHandoverResults.notApplicable,
};
const BY_KEY = new Map<string, CheckDefinition>(CHECKS.map((c) => [c.key, c]));
const nameOf = (key: string): string => BY_KEY.get(key)?.name ?? key.replaceAll('_', ' ');

/** Figures of a check in words; connectors by the name that the catalogue has. */
export function figureWords(check: PackData['checks'][number], data: PackData): string {
  const definition = BY_KEY.get(check.check);
  return Object.entries(check.figures)
    .map(([key, value]) => {
      const figure = definition?.figures.find((f) => f.key === key);
      const name = figure?.name ?? key;
      if (figure?.kind === 'number' && typeof value === 'number')
        return `${name} ${quantity(value, figure.unit, Number.isInteger(value) ? 0 : 2)}`;
      if (figure?.kind === 'choice')
        return `${name}: ${figure.options.find((o) => o.value === String(value))?.words ?? String(value)}`;
      if (figure?.kind === 'connector')
        return `${name}: ${data.connectorTypes.find((c) => c.id === value)?.name ?? papersHandoverResults.aTypeThatIs}`;
      return `${name}: ${String(value)}`;
    })
    .join('; ');
}

const ORDER = ['positive_to_negative', 'positive_to_earth', 'negative_to_earth'];

function readings(paper: Paper, data: PackData): void {
  paper.heading(papersHandoverResults.polarityAndOpenCircuit, 2);
  paper.text(papersHandoverResults.voltsAtTheHome, { size: 8.5, colour: PAPER.ink2 });
  const groups = groupedBy(data.readings, (r) => `${r.string}\n${r.stage}`);
  paper.table(
    [
      { header: papersHandoverResults.string, share: 1.1 },
      { header: papersHandoverResults.stage, share: 1.8 },
      { header: papersHandoverResults.to, share: 1.2, align: 'right' },
      { header: papersHandoverResults.expected, share: 1.9, align: 'right' },
      { header: papersHandoverResults.toEarth, share: 1.2, align: 'right' },
      { header: papersHandoverResults.toEarth2, share: 1.2, align: 'right' },
      { header: papersHandoverResults.finding, share: 3.4 },
      { header: papersHandoverResults.takenBy, share: 2.2 },
    ],
    [...groups.values()].map((group) => {
      const of = (kind: string) => group.find((r) => r.kind === kind);
      const [main, positive, negative] = ORDER.map(of);
      const finding = main?.finding;
      const newest = [...group].sort((a, b) => a.at.localeCompare(b.at)).at(-1);
      return [
        group[0]?.string ?? '',
        STAGES[group[0]?.stage ?? ''] ?? '',
        volts(main?.voltage),
        finding?.expectedLowV != null && finding.expectedHighV != null
          ? papersHandoverResults.expectedLowVToExpectedHighVv(finding.expectedLowV, finding.expectedHighV)
          : '',
        volts(positive?.voltage),
        volts(negative?.voltage),
        finding
          ? `${OUTCOMES[finding.outcome] ?? finding.outcome}. ${finding.headline}`
          : papersHandoverResults.notJudged,
        newest ? `${newest.person}, ${longDate(newest.at, data.site.timeZone)}` : '',
      ];
    }),
    papersHandoverResults.noReadingIsRecorded,
  );
}

const MEASURED_CHECKS = ['insulation', 'earth_continuity', 'voltage_to_earth', 'string_current'] as const;

function measuredChecks(paper: Paper, data: PackData): void {
  for (const key of MEASURED_CHECKS) {
    const rows = data.checks.filter((c) => c.check === key);
    paper.heading(nameOf(key), 2);
    const source = BY_KEY.get(key)?.source;
    if (source) paper.text(source, { size: 8.5, colour: PAPER.ink2 });
    paper.table(
      [
        { header: papersHandoverResults.string, share: 1 },
        { header: papersHandoverResults.result, share: 1.3 },
        { header: papersHandoverResults.figures, share: 4 },
        { header: 'By', share: 2.2 },
      ],
      rows.map((c) => [
        c.string,
        CHECK_RESULTS[c.result] ?? c.result,
        [figureWords(c, data), c.reason, c.note].filter(Boolean).join('. '),
        `${c.person}, ${longDate(c.at, data.site.timeZone)}`,
      ]),
      papersHandoverResults.noneIsRecorded,
    );
  }
}

function rollCall(paper: Paper, data: PackData): void {
  paper.heading(papersHandoverResults.functionalTestRollCall, 2);
  for (const run of data.rollCalls)
    paper.text(
      papersHandoverResults.rollCallRun(
        when(run.startedAt, data),
        run.startedBy,
        run.personOnSite,
        run.stoppedAt && when(run.stoppedAt, data),
      ),
      { size: 9 },
    );
  paper.table(
    [
      { header: papersHandoverResults.string, share: 1 },
      { header: papersHandoverResults.heard, share: 1, align: 'right' },
      { header: papersHandoverResults.onTheAsBuilt, share: 1, align: 'right' },
      { header: papersHandoverResults.weakestSignal, share: 1, align: 'right' },
    ],
    data.heard.map((h) => [h.string, number(h.heard), number(h.roster), quantity(h.weakest, 'dBm')]),
    papersHandoverResults.noUnitOfThis,
  );
  if (data.heardUnknown.length > 0)
    paper.text(papersHandoverResults.heardAndOnNo(data.heardUnknown.join(', ')), { size: 9 });
}

function shutdownTests(paper: Paper, data: PackData, tests: readonly PackTest[]): void {
  paper.heading(papersHandoverResults.shutdownTests, 2);
  paper.text(papersHandoverResults.onlyARatedInstrument, { size: 8.5, colour: PAPER.ink2 });
  if (tests.length === 0) paper.text(papersHandoverResults.noShutdownTestIs);
  for (const test of tests) {
    paper.heading(`${test.zone}: ${RESULTS[test.result] ?? test.result}`, 3);
    paper.text(test.headline, { size: 9.5 });
    paper.facts([
      ['At', when(test.at, data)],
      [papersHandoverResults.initiator, test.initiator],
      ...test.facts,
      [papersHandoverResults.signedBy, test.signedBy],
      [papersHandoverResults.fingerprintOfTheTest, test.fingerprint],
    ]);
    paper.table(
      [
        { header: papersHandoverResults.string, share: 1 },
        { header: papersHandoverResults.result, share: 2 },
        { header: papersHandoverResults.highest, share: 1, align: 'right' },
        { header: papersHandoverResults.slowestUnit, share: 1.6, align: 'right' },
        { header: papersHandoverResults.whatWasSeen, share: 5 },
      ],
      test.strings.map((s) => [s.name, RESULTS[s.result] ?? s.result, volts(s.highestV), s.slowest, s.words]),
    );
  }
}

export function testResults(paper: Paper, data: PackData, tests: readonly PackTest[]): void {
  paper.heading(papersHandoverResults.n7TestResults, 1);
  readings(paper, data);
  measuredChecks(paper, data);
  rollCall(paper, data);
  shutdownTests(paper, data, tests);
}

const SHORT: Record<string, string> = { pass: 'pass', fail: 'FAIL', not_applicable: 'n/a' };
const PHOTO = { width: 112, height: 84, gap: 10 };

export function installChecks(paper: Paper, data: PackData, photos: ReadonlyMap<string, Buffer>): void {
  paper.heading(papersHandoverResults.n8InstallChecks, 1);
  const signed = new Map(data.signOffs.map((s) => [s.string, s]));
  for (const s of data.strings) {
    const checks = data.checks.filter((c) => c.string === s.name);
    const sign = signed.get(s.name);
    paper.heading(s.name, 2);
    paper.text(
      sign
        ? papersHandoverResults.signedBy2(sign.person, when(sign.at, data), sign.stale)
        : papersHandoverResults.notSigned,
      { size: 9, weight: sign && !sign.stale ? 400 : 600 },
    );
    paper.table(
      [
        { header: papersHandoverResults.check, share: 2.2 },
        { header: papersHandoverResults.result, share: 0.8 },
        { header: papersHandoverResults.figuresReasonNote, share: 4 },
        { header: 'By', share: 2 },
      ],
      checks.map((c) => [
        nameOf(c.check),
        SHORT[c.result] ?? c.result,
        [figureWords(c, data), c.reason, c.note].filter(Boolean).join('. '),
        `${c.person}, ${longDate(c.at, data.site.timeZone)}`,
      ]),
      papersHandoverResults.noCheckIsRecorded,
    );
    pictures(
      paper,
      data,
      data.photos.filter((p) => p.string === s.name),
      photos,
    );
  }
}

function pictures(
  paper: Paper,
  data: PackData,
  shown: PackData['photos'],
  photos: ReadonlyMap<string, Buffer>,
): void {
  const perRow = Math.floor((paper.width + PHOTO.gap) / (PHOTO.width + PHOTO.gap));
  for (let i = 0; i < shown.length; i += perRow)
    paper.figure(PHOTO.height + 34, (x, y) => {
      shown.slice(i, i + perRow).forEach((photo, k) => {
        const left = x + k * (PHOTO.width + PHOTO.gap);
        const bytes = photos.get(photo.ref);
        paper.pen.rect(left, y, PHOTO.width, PHOTO.height).lineWidth(0.5).strokeColor(PAPER.rule).stroke();
        if (bytes)
          paper.pen.image(bytes, left, y, {
            fit: [PHOTO.width, PHOTO.height],
            align: 'center',
            valign: 'center',
          });
        paper.setAt(
          `${photo.note || photo.name}\n${photo.person ?? ''} ${longDate(photo.at, data.site.timeZone)}`.slice(
            0,
            90,
          ),
          left,
          y + PHOTO.height + 3,
          PHOTO.width,
          { size: 7, colour: PAPER.ink2 },
        );
      });
    });
}

export function openPoints(paper: Paper, data: PackData, design: readonly string[]): void {
  paper.heading(papersHandoverResults.n9OpenPoints, 1);
  if (data.gaps.length === 0 && design.length === 0) paper.text(papersHandoverResults.noneEveryStepWas);
  if (data.gaps.length > 0) {
    paper.heading(papersHandoverResults.acceptedAsTheyAre, 2);
    paper.table(
      [
        { header: papersHandoverResults.point, share: 3 },
        { header: papersHandoverResults.reason, share: 4 },
        { header: papersHandoverResults.acceptedBy, share: 2 },
      ],
      data.gaps.map((g) => [g.words, g.reason, `${g.person}, ${longDate(g.at, data.site.timeZone)}`]),
    );
  }
  if (design.length > 0) {
    paper.heading(papersHandoverResults.designChecksThatAre, 2);
    for (const words of design) paper.text(`–  ${words}`, { size: 9.5 });
  }
  const other = data.photos.filter((p) => p.string === null);
  if (other.length > 0)
    paper.text(papersHandoverResults.morePhotosOfThe(other.length), { size: 9, colour: PAPER.ink2 });
}
