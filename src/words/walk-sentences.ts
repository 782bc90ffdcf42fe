import type { Stop, StopKind } from '../domain/commissioning/walk';
import { countAtStart, listed } from '../drawings/numbers';
import type { WalkPage } from '../schemas/api/walk';
import { planeWithin } from './domain-planes';

export const STOP_WORDS: Record<StopKind, string> = {
  not_shutting_down: 'not shutting down',
  stuck: 'stuck in shutdown',
  silent: 'silent',
  unheard: 'unheard',
  unplaced: 'no unit on the as-built',
};

/** What somebody does there. */
export const STOP_TASKS: Record<StopKind, string> = {
  not_shutting_down:
    'Passes while shutdown is commanded: treat its string as live; replace the unit once isolated.',
  stuck: 'In shutdown while released: check its leads and their order, then replace the unit.',
  silent: 'Reported and stopped: is its module mated, shaded, its radio reached?',
  unheard: 'Never answered: compare the label with the serial here; is its module mated?',
  unplaced: 'The as-built has no serial here: read the label, or put a unit in.',
};

/** "Three stops on the south roof". */
export function walkHeading(page: WalkPage, stops: readonly Stop[]): string {
  if (stops.length === 0)
    return page.rollCalled ? 'Nobody has to go on the roof' : 'No stops before the roll call';
  const planes = new Set(stops.flatMap((s) => page.roof.find((r) => r.stringId === s.stringId)?.plane ?? []));
  const where =
    planes.size === 1
      ? ` on the ${planeWithin([...planes][0] ?? '')}`
      : ` on ${countAtStart(planes.size).toLowerCase()} planes`;
  return `${countAtStart(stops.length)} ${stops.length === 1 ? 'stop' : 'stops'}${planes.size > 0 ? where : ''}`;
}

/** "B3-5, B3-9 stuck in shutdown · B1-9 unheard", the gravest first. */
export function walkSentence(page: WalkPage, stops: readonly Stop[]): string {
  if (stops.length === 0)
    return page.rollCalled
      ? 'No unit is stuck, silent, unheard or without a place.'
      : 'Units that have not been asked are all unheard. Start the roll call first.';
  const kinds = Object.keys(STOP_WORDS) as StopKind[];
  return kinds
    .flatMap((kind) => {
      const of = stops.filter((s) => s.kind === kind);
      if (of.length === 0) return [];
      const names =
        of.length <= 6
          ? listed(of.map((s) => s.key))
          : `${of.length} units of ${listed([...new Set(of.map((s) => s.stringName))])}`;
      return [`${names} ${STOP_WORDS[kind]}`];
    })
    .join(' · ');
}
