import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { PASSWORD_MIN, passwordFault } from './password';

const about = { email: 'odile.nwosu@lowfield.example', name: 'Odile Nwosu' };
const common = new Set(['correcthorsebatterystaple', 'passwordpassword']);
const fault = (password: string) => passwordFault(password, about, (word) => common.has(word));

describe('a password', () => {
  it.each(['roof-ladder-meter', 'ein langer Satz über Dächer', '夜の屋根と長い梯子と電圧計の話'])(
    'may be %s',
    (password) => {
      expect(fault(password)).toBeNull();
    },
  );

  it.each([
    ['elevenchars', 'at least 12'],
    ['correcthorsebatterystaple', 'tried first'],
    ['CorrectHorseBatteryStaple', 'tried first'],
    ['passwordpassword123!', 'tried first'],
    ['aaaaaaaaaaaaaaaa', 'Too few different'],
    ['odile.nwosu@lowfield.example', 'own name'],
    ['Odile Nwosu 12', 'own name'],
    ['x'.repeat(201) + 'abcdef', 'at most 200'],
  ])('may not be %s', (password, why) => {
    expect(fault(password)).toContain(why);
  });

  it('asks for no kind of character', () => {
    fc.assert(
      fc.property(fc.stringMatching(/^[b-km-ru-z]{12,40}$/), (password) => {
        fc.pre(new Set(password).size >= 5);
        return fault(password) === null;
      }),
    );
  });

  it('below its shortest length is always refused', () => {
    fc.assert(
      fc.property(fc.string({ maxLength: PASSWORD_MIN - 1 }), (password) => fault(password) !== null),
    );
  });
});
