import { Notice } from '../../components/ui/Notice';
import { secretNotice } from '../../words/webhooks';

/** The secret, shown this once. */
export function SecretNotice({ secret }: { secret: string }) {
  return (
    <Notice kind="done" title={secretNotice.keepThisSecretWhere}>
      <label className="block">
        <span className="sr-only">{secretNotice.secret}</span>
        <input
          readOnly
          value={secret}
          onFocus={(event) => event.target.select()}
          className="min-h-[44px] w-full rounded border border-rule bg-sheet px-3 font-mono text-[15px] text-ink"
        />
      </label>
    </Notice>
  );
}
