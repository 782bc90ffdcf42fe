import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { copyLink } from '../../words/strings';

/** Copies the address of exactly this view; where the browser keeps the clipboard shut, shows it to be copied by hand. */
export function CopyLink({ address }: { address: () => string }) {
  const [shown, setShown] = useState<{ url: string; copied: boolean } | null>(null);
  const copy = () => {
    const url = new URL(address(), window.location.origin).href;
    const failed = () => setShown({ url, copied: false });
    // only where the page came over a safe connection is there a clipboard
    const clipboard = navigator.clipboard as Clipboard | undefined;
    if (!clipboard) return failed();
    clipboard.writeText(url).then(() => setShown({ url, copied: true }), failed);
  };
  return (
    <span className="inline-flex flex-wrap items-center gap-2">
      <Button onClick={copy}>{shown?.copied ? copyLink.linkCopied : copyLink.copyLink}</Button>
      <span role="status" className={shown && !shown.copied ? '' : 'sr-only'}>
        {shown &&
          (shown.copied ? (
            copyLink.theLinkToExactly
          ) : (
            <input
              readOnly
              value={shown.url}
              aria-label={copyLink.linkToThisView}
              onFocus={(event) => event.target.select()}
              className="target w-[260px] rounded border border-rule bg-sheet px-2 text-sm text-ink"
            />
          ))}
      </span>
    </span>
  );
}
