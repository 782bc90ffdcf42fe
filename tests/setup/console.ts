import { format } from 'node:util';
import { afterEach, beforeEach, expect } from 'vitest';

/** What a test prints as error or warning fails it. A test that expects some spies on the console itself. */
const heard: string[] = [];
const kept = { error: console.error, warn: console.warn };

beforeEach(() => {
  heard.length = 0;
  console.error = (...args: unknown[]) => void heard.push(`console.error: ${format(...args)}`);
  console.warn = (...args: unknown[]) => void heard.push(`console.warn: ${format(...args)}`);
});

afterEach(() => {
  Object.assign(console, kept);
  expect(heard, 'noise on the console').toEqual([]);
});
