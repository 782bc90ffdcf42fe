import { nextStep, settle, type Answer, type Link, type Waiting } from './capture-queue';

/** Where records are kept, as far as sending needs it. */
export interface Kept {
  all(): Promise<Waiting[]>;
  change(changed: readonly Waiting[], removed?: readonly string[]): Promise<void>;
}
export interface Round {
  kept: Kept;
  person: string;
  /** Hands one record to the server. Never throws: no answer is an answer. */
  send: (record: Waiting) => Promise<Answer>;
  now: () => number;
  random: () => number;
  /** After each record: what is on its way or settled now. */
  heard?: (link: Link, sending: Waiting | null) => void;
}

/**
 * Sends what may go, one after the other, until nothing may. Returns the link and when to come back (ms since 1970),
 * null where only a person or a sign of the network brings it further.
 */
export async function sendRound(round: Round, from: Link): Promise<{ link: Link; again: number | null }> {
  let link = from;
  for (;;) {
    const step = nextStep(await round.kept.all(), round.person, link, round.now());
    if ('idle' in step) return { link, again: null };
    if ('waitUntil' in step) return { link, again: step.waitUntil };
    round.heard?.(link, step.send);
    const answer = await round.send(step.send);
    const settled = settle(step.send, answer, link, round.now(), round.random());
    link = settled.link;
    if (settled.record === null) await round.kept.change([], [step.send.ref]);
    else if (settled.record !== step.send) await round.kept.change([settled.record]);
    round.heard?.(link, null);
  }
}
