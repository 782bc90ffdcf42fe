import { Fold } from '../../components/ui/Fold';
import { Sheet } from '../../components/ui/Sheet';
import { VERIFY_EXAMPLE } from './example';
import { verifySheet } from '../../words/webhooks';

const HEADERS: readonly (readonly [string, string])[] = [
  ['Wakeline-Delivery', verifySheet.namesTheCallThe],
  ['Wakeline-Time', verifySheet.whenItWasSigned],
  ['Wakeline-Signature', verifySheet.sha256AndHmac],
];

/** What a receiver has to know. */
export function VerifySheet() {
  return (
    <Sheet id="verify" title={verifySheet.whatAReceiverDoes}>
      <p>{verifySheet.aCallIsA}</p>
      <dl className="mt-3 grid gap-x-4 gap-y-1 sm:grid-cols-[180px_minmax(0,1fr)]">
        {HEADERS.map(([name, meaning]) => (
          <div key={name} className="contents">
            <dt className="font-medium">{name}</dt>
            <dd className="text-ink-2">{meaning}</dd>
          </div>
        ))}
      </dl>
      <div className="mt-3">
        <Fold title={verifySheet.anExampleThatProves} opens={verifySheet.showIt}>
          <pre
            tabIndex={0}
            aria-label={verifySheet.example}
            className="overflow-x-auto border border-rule-faint bg-film p-3 text-sm leading-5"
          >
            {VERIFY_EXAMPLE}
          </pre>
        </Fold>
      </div>
    </Sheet>
  );
}
