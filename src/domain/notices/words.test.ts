import { describe, expect, it } from 'vitest';
import { adviceFor } from './advice';
import { toldOf, type NoticeEvent } from './event';
import { liveWords, noticeWords, stringsInWords } from './words';

const AT = new Date('2026-12-01T10:00:00Z');
const event = (kind: NoticeEvent['kind'], detail: Record<string, unknown>): NoticeEvent => ({
  id: 1,
  kind,
  at: AT,
  recordedAt: AT,
  siteId: 1,
  detail,
});
const words = (e: NoticeEvent, i = 0) => {
  const told = toldOf(e)[i];
  if (!told) throw new Error('nothing is told');
  return noticeWords(told, e, {
    evidence: 'Measured at the input.',
    units: [
      { stringName: 'B3', position: 9 },
      { stringName: 'B3', position: 4 },
      { stringName: 'B4', position: null },
    ],
  });
};

describe('the words of a notice', () => {
  it('of a hazard say what to treat as live, and that over is no proof', () => {
    const detail = { cause: 'x', hazard: true, headline: 'Two units did not shut down' };
    expect(words(event('cause_opened', detail))).toEqual({
      headline: 'Two units did not shut down',
      body: 'Treat as live: all of B3 and B4, with the home run and everything up to the inverter.',
    });
    const over = words(event('cause_closed', detail));
    expect(over.headline).toBe('Over: Two units did not shut down');
    expect(over.body).toContain('prove dead');
    expect(liveWords([])).toBe('Treat as live: every string of the site.');
  });

  it('of what is silent say that a shutdown can’t be confirmed', () => {
    const gateway = { cause: 'x', kind: 'silent', headline: 'Gateway G2 is silent: 12 units behind it' };
    expect(words(event('cause_opened', gateway))).toEqual({
      headline: gateway.headline,
      body: 'Measured at the input. Until they report, a shutdown of these units can’t be confirmed: treat them as live.',
    });
    // the gateway's own event is in the history: nobody is told twice
    expect(toldOf(event('gateway_silent', { gateway: 'G2', units: 12 }))).toEqual([]);
    expect(words(event('logger_lost', { logger: 'L7' })).headline).toBe(
      'The logger L7 has not reported for an hour',
    );
  });

  it('to a customer are about the report, without anybody’s words on it', () => {
    const detail = { title: 'It hums', number: 4, person: 'Ada', reason: 'still 3 V short' };
    expect(words(event('case_closed', { ...detail, state: 'done' }))).toEqual({
      headline: 'Looked into and done: It hums',
      body: '',
    });
    expect(words(event('case_reopened', detail))).toEqual({ headline: 'Taken up again: It hums', body: '' });
    expect(words(event('case_reopened', detail), 1).body).toBe('still 3 V short');
  });

  it('count where naming would be too long', () => {
    const many = Array.from({ length: 9 }, (_, i) => ({ stringName: `S${i}`, position: null }));
    expect(stringsInWords(many)).toBe('9 strings');
    const long = Array.from({ length: 9 }, (_, i) => ({ stringName: 'A1', position: i }));
    expect(stringsInWords(long)).toBe('A1');
  });
});

describe('advice', () => {
  it.each(['unconfirmed', 'silent'])('for %s sends nobody to units that are taken for dead', (kind) => {
    expect(adviceFor(kind, null).ladder).toMatch(/^Treat these (strings|units) as live/);
  });
  it('begins at the shared part, but for a hazard at the telephone', () => {
    expect(adviceFor('stuck', 'transmitter').today).toMatch(/^Look at the transmitter/);
    expect(adviceFor('not_shutting_down', 'transmitter').today).toMatch(/^Call the site now/);
  });
});
