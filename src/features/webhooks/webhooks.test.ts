import { describe, expect, it } from 'vitest';
import type { WebhookItem } from '../../schemas/api/webhooks';
import { stateWords, webhookFinding, webhooksFinding } from '../../words/webhooks-sentences';

const AT = '2026-12-01T12:00:00.000Z';
const hook = (more: Partial<WebhookItem> = {}): WebhookItem => ({
  id: '00000000-0000-4000-8000-000000000001',
  name: 'Desk',
  url: 'https://desk.example/wakeline',
  kinds: ['hazard'],
  active: true,
  createdBy: 'Ada',
  createdAt: AT,
  failingSince: null,
  disabledAt: null,
  waiting: 0,
  lastDeliveredAt: AT,
  ...more,
});

describe('the words of webhooks', () => {
  it.each([
    [[], 'No other system is told of anything'],
    [[hook()], '1 webhook, none failing'],
    [[hook(), hook({ failingSince: AT })], 'Calls of 1 webhook fail'],
    [
      [hook({ failingSince: AT }), hook({ active: false, disabledAt: AT })],
      '1 webhook is switched off after days of failing',
    ],
  ])('%#', (webhooks, words) => {
    expect(webhooksFinding({ webhooks }).finding.replaceAll('\u00a0', ' ')).toBe(words);
  });

  it.each([
    [hook(), 'Desk takes its calls'],
    [hook({ lastDeliveredAt: null }), 'Desk has not been called yet'],
    [hook({ active: false }), 'Desk is switched off'],
    [hook({ failingSince: AT, waiting: 2 }), 'Calls of Desk fail'],
  ])('of one: %#', (one, words) => {
    expect(webhookFinding(one).finding).toBe(words);
  });

  it('say where a call stands', () => {
    const tried = { at: AT, status: 500, latencyMs: 3, excerpt: '', error: 'x' };
    expect(stateWords({ state: 'waits', attempts: [] })).toBe('on its way');
    expect(stateWords({ state: 'waits', attempts: [tried] }).replaceAll('\u00a0', ' ')).toBe('waits, 1 try');
    expect(stateWords({ state: 'given_up', attempts: [tried] })).toBe('given up');
  });
});
