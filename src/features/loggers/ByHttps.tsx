import { useSyncExternalStore } from 'react';
import { BATCH_MAX_BYTES, BATCH_MESSAGES_MAX } from '../../schemas/ingest';
import { paths } from '../../schemas/paths';

const MB = 1024 * 1024;

const never = () => () => undefined;
const here = (): string => window.location.origin;
const elsewhere = (): string => '';

/** The two calls of a logger that reports in batches. */
export function ByHttps() {
  const origin = useSyncExternalStore(never, here, elsewhere);
  const box =
    'my-2 block overflow-x-auto whitespace-pre rounded border border-rule bg-film px-3 py-3 text-sm';
  return (
    <div className="max-w-[860px] pb-4 text-[15px] leading-6">
      <p>
        It fetches its roster, which names its strings with their slots, and sends the same messages as on the
        WebSocket, one a line:
      </p>
      <code tabIndex={0} className={box}>
        {`curl -H "Authorization: Bearer TOKEN" ${origin}${paths.api.v1IngestRoster()}

curl -H "Authorization: Bearer TOKEN" -H "Content-Type: application/x-ndjson" \\
  --data-binary @readings.ndjson ${origin}${paths.api.v1Ingest()}`}
      </code>
      <p>
        The answer comes once everything is kept, and tells what was refused: which message, which field, what
        would do. Without an answer send all of it again; what comes twice is kept once. At most{' '}
        {BATCH_MESSAGES_MAX} messages and {BATCH_MAX_BYTES / MB} MB at a time, packed with gzip if you like,
        and one batch of a logger after the other. 429 and 503 say in Retry-After when to come back.
      </p>
    </div>
  );
}
