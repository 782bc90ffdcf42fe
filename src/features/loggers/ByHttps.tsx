import { useSyncExternalStore } from 'react';
import { BATCH_MAX_BYTES, BATCH_MESSAGES_MAX } from '../../schemas/lists-and-limits';
import { paths } from '../../schemas/paths';
import { byHttps } from '../../words/loggers';

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
      <p>{byHttps.itFetchesItsRoster}</p>
      <code tabIndex={0} className={box}>
        {`curl -H "Authorization: Bearer TOKEN" ${origin}${paths.api.v1IngestRoster()}

curl -H "Authorization: Bearer TOKEN" -H "Content-Type: application/x-ndjson" \\
  --data-binary @readings.ndjson ${origin}${paths.api.v1Ingest()}`}
      </code>
      <p>{byHttps.theAnswerComesOnce(BATCH_MESSAGES_MAX, BATCH_MAX_BYTES, MB)}</p>
    </div>
  );
}
