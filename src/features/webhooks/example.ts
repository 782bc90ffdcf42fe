import { webhooksExample } from '../../words/webhooks';
/** How a receiver proves that a call is Wakeline's. Shown on the page as it is, and run by a test as it is. */
export const VERIFY_EXAMPLE = webhooksExample.importCreateHmacTimingSafeEqualFrom;
