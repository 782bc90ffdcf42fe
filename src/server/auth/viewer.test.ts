import { expect, it } from 'vitest';
import { initialsOf } from './viewer';

it.each([
  ['Odile Nkemelu', 'ON'],
  ['Ana Maria de Sá', 'AS'],
  ['Björk', 'B'],
  ['  ', ''],
])('initials of %s are %s', (name, initials) => {
  expect(initialsOf(name)).toBe(initials);
});
