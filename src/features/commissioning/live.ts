import { replaced, tells } from '../../lib/patch';
import type { Change } from '../../schemas/live';
import type { RollCallPage } from '../../schemas/api/roll-call';

/** The page with what /live brought; the page itself comes back when nothing of it changed. */
export function patchRollCall(page: RollCallPage, change: Change): RollCallPage {
  const answers = replaced(page.answers, change.heard, (a) => a.serial);
  const strings = replaced(page.strings, change.strings, (s) => s.id);
  const gateways = replaced(page.gateways, change.gateways, (g) => g.number);
  const commands = change.site?.commands ?? page.commands;
  if (
    answers === page.answers &&
    strings === page.strings &&
    gateways === page.gateways &&
    commands === page.commands
  )
    return page;
  return { ...page, answers, strings, gateways, commands };
}

/** Somebody started or stopped the roll call: the page has to be read again. */
export const runChanged = (change: Change): boolean =>
  change.rollCallStopped !== undefined ||
  tells(
    change,
    (e) => e.kind === 'roll_call_started' || e.kind === 'roll_call_stopped' || e.kind === 'roster_changed',
  );
