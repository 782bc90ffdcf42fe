import type { Config } from '../config';
import { SCRIPT_HASHES, STYLE_HASHES } from './inline-scripts';

/** What every answer tells the browser about what may be done with it. */

/** What a page may do beyond the others; it says so itself, on `Astro.locals.doors`. */
export interface Doors {
  /** Reads codes with the camera: it may use it, and run the decoder (WebAssembly). */
  camera?: boolean;
  /** The origin of a page that may show this one in a frame. */
  framedBy?: string | null;
}

const policy = (directives: Record<string, readonly string[]>): string =>
  Object.entries(directives)
    .map(([name, values]) => [name, ...values].join(' '))
    .join('; ');

const SELF = "'self'";
const NONE = "'none'";

/**
 * The policy of a page. Scripts: our files, and the few inline ones by hash. Styles: our files; style *attributes*
 * stay allowed, since React writes sizes and colours of drawings into them on the server: they run nothing, load
 * nothing from elsewhere (img-src, font-src) and no text of a person is ever put into one.
 * In development Vite brings scripts and styles of its own, unknown beforehand.
 */
export function pagePolicy(doors: Doors, development: boolean): string {
  return policy({
    'default-src': [NONE],
    'script-src': [
      SELF,
      ...(development ? ["'unsafe-inline'"] : SCRIPT_HASHES),
      ...(doors.camera ? ["'wasm-unsafe-eval'"] : []),
    ],
    'script-src-attr': [NONE],
    'style-src': [SELF, ...(development ? ["'unsafe-inline'"] : STYLE_HASHES)],
    'style-src-attr': ["'unsafe-inline'"],
    'img-src': [SELF, 'data:', 'blob:'],
    'font-src': [SELF],
    'connect-src': [SELF],
    'worker-src': [SELF],
    'manifest-src': [SELF],
    'base-uri': [NONE],
    'form-action': [SELF],
    'frame-ancestors': [doors.framedBy ?? NONE],
  });
}

/** The policy of what is no page: it loads nothing, runs nothing, and stands in no frame. */
export const DATA_POLICY = policy({ 'default-src': [NONE], 'frame-ancestors': [NONE], sandbox: [] });

const FEATURES = [
  'accelerometer',
  'display-capture',
  'geolocation',
  'gyroscope',
  'magnetometer',
  'microphone',
  'midi',
  'payment',
  'usb',
] as const;
const permissions = (camera: boolean): string =>
  [`camera=(${camera ? 'self' : ''})`, ...FEATURES.map((f) => `${f}=()`)].join(', ');

type Transport = Pick<Config, 'HSTS_MAX_AGE_S'>;

/** Of every answer, files of the build included. */
export const commonHeaders = ({ HSTS_MAX_AGE_S }: Transport): Record<string, string> => ({
  'x-content-type-options': 'nosniff',
  'cross-origin-resource-policy': 'same-origin',
  ...(HSTS_MAX_AGE_S === undefined ? {} : { 'strict-transport-security': `max-age=${HSTS_MAX_AGE_S}` }),
});

/** Of what the product answers itself: pages and data. What an answer says of itself stands above it. */
export const answerHeaders = (
  settings: Transport,
  answer: { isPage: boolean; doors?: Doors; development: boolean },
): Record<string, string> => ({
  ...commonHeaders(settings),
  'referrer-policy': 'same-origin',
  'cross-origin-opener-policy': 'same-origin',
  'permissions-policy': permissions(answer.doors?.camera ?? false),
  'content-security-policy': answer.isPage ? pagePolicy(answer.doors ?? {}, answer.development) : DATA_POLICY,
});
