import { describe, expect, it } from 'vitest';
import { eventTime, RETURN_WITHIN_S } from './progress';

const NOW = 1_750_000_000;

describe('how far the reports of a logger have come', () => {
  it('to now, while it reports in time', () => {
    expect(eventTime({ served: true, spokeS: NOW - 2, newestS: NOW - 70 }, 60, NOW)).toBe(NOW);
  });
  it('to its newest report, while it brings what it kept', () => {
    expect(eventTime({ served: true, spokeS: NOW - 1, newestS: NOW - 7200 }, 60, NOW)).toBe(NOW - 7200);
  });
  it('to now, when it is connected and has nothing to say', () => {
    expect(eventTime({ served: true, spokeS: NOW - 91, newestS: NOW - 7200 }, 60, NOW)).toBe(NOW);
  });
  it("can't be said just after it connected, or before it had the time to come back", () => {
    expect(eventTime({ served: true, spokeS: NOW - 1, newestS: 0 }, 60, NOW)).toBeNull();
    expect(eventTime({ served: false, sinceS: NOW - RETURN_WITHIN_S + 1 }, 60, NOW)).toBeNull();
  });
  it('to now, when it stays away', () => {
    expect(eventTime({ served: false, sinceS: NOW - RETURN_WITHIN_S }, 60, NOW)).toBe(NOW);
  });
});
