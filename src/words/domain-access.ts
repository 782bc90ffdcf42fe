import type { TokenScope } from '../domain/access/scopes';

export const scopeTexts: Record<TokenScope, string> = {
  'sites:read': 'Sites and strings, with what they make now',
  'units:read': 'Units: where they are, how they are, what is wrong and why',
  'events:read': 'Events, as they happen, and notes on the time axis',
  'telemetry:read': 'Readings: minutes, quarters of an hour, days',
  'commissioning:read': 'Roll calls and shutdown tests',
  'cases:read': 'Cases, with who works on them and what was found',
  'loggers:read': 'Loggers and when they last spoke',
  write: 'Write: acknowledge hazards, record meter readings, open cases, pin notes',
};

/** Why a password won't do, and what will. */
export const passwordSaid = {
  tooShort: (least: number) => `Use at least ${least} characters: three or four words do well.`,
  tooLong: (most: number) => `Use at most ${most} characters.`,
  tooPlain: 'Too few different characters: it would be guessed at once.',
  common: 'This one is among the passwords that are tried first. Choose another.',
  own: 'It is made of your own name or address. Choose another.',
};
