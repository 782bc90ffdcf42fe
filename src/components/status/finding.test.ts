import { createElement } from 'react';
import { renderToStaticMarkup } from 'react-dom/server';
import { describe, expect, it } from 'vitest';
import type { InstallationStatus } from '../../schemas/api/status';
import { LoggersSheet } from './LoggersSheet';
import { StatusSheets } from './StatusSheets';
import { statusFinding } from './finding';

const AT = '2026-06-01T14:00:00.000Z';
const logger = (serial: string, some: Partial<InstallationStatus['loggers'][number]> = {}) => ({
  siteId: '00000000-0000-4000-8000-000000000001',
  siteName: 'Depot',
  timeZone: 'UTC',
  serial,
  firmware: null,
  connected: true,
  lastSpokeAt: AT,
  lastAddress: null,
  refused: 0,
  lastRefusal: null,
  ...some,
});
const status = (some: Partial<InstallationStatus> = {}): InstallationStatus => ({
  at: AT,
  database: { version: '15.1', bytes: 1e9, rowSecurity: true },
  replica: null,
  processes: [],
  unknownTokens: null,
  loggers: [logger('A'), logger('B')],
  work: {
    newestFrameAt: AT,
    unjudgedSince: null,
    unjudgedStrings: 0,
    rolledUpTo: '2026-06-01T13:45:00.000Z',
    quartersWaiting: 3,
    lateFrames: 0,
    preparedTo: '2026-06-04',
  },
  ...some,
});
const work = (some: Partial<InstallationStatus['work']>) => status({ work: { ...status().work, ...some } });

it('what a page says that stands open is instants, which stay true, in one zone', () => {
  const shown = { status: status({ loggers: [logger('A', { timeZone: 'Asia/Dubai' })] }), timeZone: 'UTC' };
  for (const sheet of [StatusSheets, LoggersSheet]) {
    const html = renderToStaticMarkup(createElement(sheet, shown));
    expect(html).toContain('>14:00:00</time>');
    expect(html).not.toMatch(/>just now<| ago</);
  }
});

describe('how an installation runs', () => {
  it('says so when all is well, with what was refused', () => {
    expect(statusFinding(status())).toEqual({
      heading: 'The installation runs as it should',
      sentence: '2 of 2\u00a0loggers connected; no message was refused.',
    });
    expect(statusFinding(status({ loggers: [logger('A', { refused: 3 })] })).sentence).toContain(
      '3\u00a0messages refused',
    );
  });

  it('says that the replica does not serve', () => {
    expect(statusFinding(status({ replica: { state: 'serves', lagS: 0.4 } })).heading).toBe(
      'The installation runs as it should',
    );
    for (const state of ['behind', 'away'] as const)
      expect(statusFinding(status({ replica: { state, lagS: null } })).heading).toBe(
        'The replica does not serve, so the primary answers its readers',
      );
  });

  it('names what stands still before loggers that are away', () => {
    expect(
      statusFinding(work({ unjudgedStrings: 4, unjudgedSince: '2026-06-01T13:50:00.000Z' })).heading,
    ).toBe('Judgement is behind what has come in');
    expect(
      statusFinding(work({ unjudgedStrings: 4, unjudgedSince: '2026-06-01T13:59:30.000Z' })).heading,
    ).toBe('The installation runs as it should');
    expect(
      statusFinding(work({ rolledUpTo: '2026-06-01T12:00:00.000Z', preparedTo: '2026-06-01' })).heading,
    ).toBe('Roll-ups stand still and no place is prepared for the frames of tomorrow');
    expect(statusFinding(work({ rolledUpTo: null, newestFrameAt: null })).heading).toBe(
      'The installation runs as it should',
    );
    const away = status({ loggers: [logger('A', { connected: false }), logger('B')] });
    expect(statusFinding(away).heading).toBe('One of 2\u00a0loggers is not connected');
  });

  it('marks an installation with one database account', () => {
    const one = status({ database: { version: '15.1', bytes: 1, rowSecurity: false } });
    expect(statusFinding(one).heading).toBe('All runs with one database account');
  });
});
