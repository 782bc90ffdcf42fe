import { Notice } from '../../components/ui/Notice';
import { Sheet } from '../../components/ui/Sheet';
import type {
  StringVerdict,
  TestVerdict,
  UnitVerdict,
} from '../../domain/commissioning/shutdown-test-verdict';
import { intervalWords } from '../../words/domain-shutdown-test';
import { listed } from '../../drawings/numbers';
import { paths } from '../../schemas/paths';
import { ResultTag } from './ResultTag';
import { results } from '../../words/shutdown-test-report';

const UNIT_WORDS: Record<UnitVerdict['verdict'], string> = {
  followed: results.followed,
  late: results.followedTooLate,
  not_shutting_down: results.keptPassing,
  was_down: results.inShutdownBeforeThe,
  unknown: results.nothingKnown,
};
const BASIS = {
  measured: results.measuredOnItsConductors,
  claim: results.byItsOwnClaim,
  nothing: '',
} as const;

/** Treat as live: what a person must know before anything else. */
export function HazardCard({ verdict }: { verdict: TestVerdict }) {
  if (verdict.treatAsLive.length === 0) return null;
  return (
    <section
      aria-labelledby="live-title"
      className="border-y-2 border-crimson bg-crimson-wash px-[18px] py-4"
    >
      <h2 id="live-title" className="text-lg text-crimson">
        {results.treatAsLive(listed(verdict.treatAsLive.map((s) => s.name)))}
      </h2>
      <ul className="mt-2 space-y-1">
        {verdict.treatAsLive.map((s) => (
          <li key={s.string}>
            <strong className="font-semibold">{s.name}:</strong> {s.why}
          </li>
        ))}
      </ul>
      <p className="mt-3">{results.theInitiatorDoesNot}</p>
    </section>
  );
}

function Units({ s }: { s: StringVerdict }) {
  if (s.units.length === 0) return null;
  const of = (verdict: UnitVerdict['verdict']) =>
    s.units.filter((u) => u.serial !== null && u.verdict === verdict);
  const rest = (['not_shutting_down', 'late', 'was_down', 'unknown'] as const).flatMap((v) => {
    const units = of(v);
    return units.length === 0 ? [] : [`${units.length} ${UNIT_WORDS[v]}`];
  });
  const followed = of('followed');
  return (
    <details className="print:open:block">
      <summary className="inline-flex min-h-[44px] cursor-pointer items-center text-sm underline underline-offset-2">
        {[followed.length > 0 ? results.unitsFollowed(followed.length) : '', ...rest]
          .filter(Boolean)
          .join(', ') || results.units}
      </summary>
      <ul className="grid gap-x-6 text-sm sm:grid-cols-2">
        {s.units.map((u) => (
          <li key={u.position} className="flex flex-wrap gap-x-2 border-b border-rule-faint py-1">
            <span className="w-6 flex-none text-right font-semibold">{u.position}</span>
            <span className="text-ink-2">{u.serial ?? results.noUnit}</span>
            {u.serial !== null && (
              <span className={u.verdict === 'not_shutting_down' ? 'font-semibold text-crimson' : ''}>
                {UNIT_WORDS[u.verdict]}
                {u.followed && ` ${intervalWords(u.followed)}`}
                {u.basis !== 'nothing' && `, ${BASIS[u.basis]}`}
                {u.stuck && results.didNotComeBack}
              </span>
            )}
          </li>
        ))}
      </ul>
    </details>
  );
}

interface Props {
  verdict: TestVerdict;
  siteId: string;
  timeZone: string;
}

/** The verdict per string and unit, what stayed in shutdown, what is missing, what else is to be known. */
export function Results({ verdict, siteId, timeZone }: Props) {
  return (
    <>
      <Sheet id="results" title={results.resultByString} aside={results.limitsSource(verdict.limits.source)}>
        {verdict.strings.length === 0 && <Notice kind="empty" title={results.noStringHasBeen} />}
        <ul className="grid gap-x-10 xl:grid-cols-2">
          {verdict.strings.map((s) => (
            <li key={s.string} className="border-b border-rule-faint py-2">
              <div className="flex flex-wrap items-center gap-x-3 gap-y-1">
                <span className="text-[17px] font-semibold">{s.name}</span>
                <ResultTag result={s.result} />
              </div>
              <p className="mt-1">{s.words}</p>
              {s.carriedFrom ? (
                <p className="text-sm">
                  <a
                    className="target inline-flex items-center text-petrol hover:underline"
                    href={paths.shutdownTest(siteId, s.carriedFrom.test)}
                  >
                    {results.testedAt(s.carriedFrom.at, timeZone)}
                  </a>
                </p>
              ) : (
                s.rounds.length > 1 && (
                  <ul className="mt-1 text-sm text-ink-2">
                    {s.rounds.map((r) => (
                      <li key={r.round}>{results.roundWords(r.round, r.words)}</li>
                    ))}
                  </ul>
                )
              )}
              <Units s={s} />
            </li>
          ))}
        </ul>
      </Sheet>
      {verdict.stuck.length > 0 && (
        <Sheet id="stuck" title={results.didNotComeBack2}>
          <ul className="space-y-1">
            {verdict.stuck.map((s) => (
              <li key={s.string} className="rounded bg-rust-wash px-3 py-2 text-rust-ink">
                {results.stuckInShutdownThey(s.words)}
              </li>
            ))}
          </ul>
        </Sheet>
      )}
      {verdict.missing.length > 0 && (
        <Sheet id="missing" title={results.whatIsStillMissing}>
          <ul className="list-disc space-y-1 pl-5">
            {verdict.missing.map((m) => (
              <li key={m}>{m}</li>
            ))}
          </ul>
        </Sheet>
      )}
      {verdict.notes.length > 0 && (
        <Sheet id="notes" title={results.toKnow}>
          <ul className="list-disc space-y-1 pl-5 text-ink-2">
            {verdict.notes.map((n) => (
              <li key={n}>{n}</li>
            ))}
          </ul>
        </Sheet>
      )}
    </>
  );
}
