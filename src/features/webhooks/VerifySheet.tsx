import { Fold } from '../../components/ui/Fold';
import { Sheet } from '../../components/ui/Sheet';
import { VERIFY_EXAMPLE } from './example';

const HEADERS: readonly (readonly [string, string])[] = [
  [
    'Wakeline-Delivery',
    'names the call: the same at every try. Keep it, and a call that comes twice counts once.',
  ],
  ['Wakeline-Time', 'when it was signed, in seconds since 1970-01-01 UTC.'],
  [
    'Wakeline-Signature',
    'sha256= and the HMAC-SHA256 of time, a full stop and the body, with the secret, in hex.',
  ],
];

/** What a receiver has to know. */
export function VerifySheet() {
  return (
    <Sheet id="verify" title="What a receiver does">
      <p>
        A call is a POST with JSON. Answer with any status from 200 to 299 within ten seconds, then do your
        work. Anything else counts as failed: it is tried again after 1, 5 and 30 minutes, then hours, then
        daily. Redirects are not followed. Calls can overtake each other: go by the times in them.
      </p>
      <dl className="mt-3 grid gap-x-4 gap-y-1 sm:grid-cols-[180px_minmax(0,1fr)]">
        {HEADERS.map(([name, meaning]) => (
          <div key={name} className="contents">
            <dt className="font-medium">{name}</dt>
            <dd className="text-ink-2">{meaning}</dd>
          </div>
        ))}
      </dl>
      <div className="mt-3">
        <Fold title="An example that proves a call, in JavaScript for Node" opens="Show it">
          <pre
            tabIndex={0}
            aria-label="Example"
            className="overflow-x-auto border border-rule-faint bg-film p-3 text-sm leading-5"
          >
            {VERIFY_EXAMPLE}
          </pre>
        </Fold>
      </div>
    </Sheet>
  );
}
