import { encode } from 'uqr';
import { paths } from '../../schemas/paths';
import { ButtonLink } from '../ui/Button';
import { Fold } from '../ui/Fold';
import { openOnPhone } from '../../words/shared-capture';

interface Props {
  /** Public identifier of the site. */
  site: string;
  siteName: string;
  /** https://… as a phone reaches the site. */
  origin: string;
}

/** Width of the quiet zone that ISO/IEC 18004 asks for, in modules of the code. */
const QUIET = 4;

/** A QR code as one path: black on white in both colour schemes, as cameras want it. */
export function QrCode({ text, label, size = 176 }: { text: string; label: string; size?: number }) {
  const { data, size: modules } = encode(text, { ecc: 'M', border: 0 });
  const path = data
    .flatMap((row, y) => row.map((dark, x) => (dark ? `M${x + QUIET} ${y + QUIET}h1v1h-1z` : '')))
    .join('');
  const side = modules + 2 * QUIET;
  return (
    <svg
      role="img"
      aria-label={label}
      width={size}
      height={size}
      viewBox={`0 0 ${side} ${side}`}
      shapeRendering="crispEdges"
      className="max-w-full border border-rule"
    >
      <rect width={side} height={side} fill="#ffffff" />
      <path d={path} fill="#000000" />
    </svg>
  );
}

/** The way from a desk to the roof: a code for the phone's camera, and the address for its keyboard. */
export function OpenOnPhone({ site, siteName, origin }: Props) {
  const address = new URL(paths.capture(site), origin).href;
  const secure = address.startsWith('https:') || /^(localhost|127\.|\[::1\])/.test(new URL(address).hostname);
  return (
    <Fold title={openOnPhone.readingsAndChecksOn} opens={openOnPhone.showTheCode}>
      <div className="flex flex-wrap items-start gap-4 pb-4">
        <QrCode text={address} label={openOnPhone.codeOfTheAddress(address)} />
        <div className="min-w-0 max-w-[420px] flex-1">
          <p className="text-[15px] leading-[21px]">{openOnPhone.scanItOnceWhere(siteName)}</p>
          {!secure && (
            <p className="mt-2 text-[15px] leading-[21px] text-rust-ink">{openOnPhone.thisSiteIsReached}</p>
          )}
          <p className="mt-2 break-all text-sm text-ink-2">{address}</p>
          <ButtonLink className="mt-3 min-h-[44px]" href={paths.capture(site)}>
            {openOnPhone.openOnThisDevice}
          </ButtonLink>
        </div>
      </div>
    </Fold>
  );
}
