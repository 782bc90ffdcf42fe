import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { mentionAt, mentionChoices, mentionedIn, withMention } from './mentions';

const people = [
  { id: '1', name: 'Ada Birch' },
  { id: '2', name: 'Ada Birchwood' },
  { id: '3', name: 'Tom Lee' },
];

describe('mentions in a comment', () => {
  it('finds what is typed behind the sign, and nothing in an address', () => {
    expect(mentionAt('Ask @To', 7)).toEqual({ from: 4, typed: 'To' });
    expect(mentionAt('@', 1)).toEqual({ from: 0, typed: '' });
    expect(mentionAt('mail to a@b', 11)).toBeNull();
    expect(mentionAt('@Tom Lee has it', 15)).toBeNull();
    expect(mentionAt('no sign', 4)).toBeNull();
  });

  it('offers people by the beginning of any of their names', () => {
    expect(mentionChoices(people, 'bir').map((p) => p.id)).toEqual(['1', '2']);
    expect(mentionChoices(people, 'tom l').map((p) => p.id)).toEqual(['3']);
    expect(mentionChoices(people, '', 2)).toHaveLength(2);
  });

  it('puts the name in and the cursor behind it', () => {
    expect(withMention('Ask @To about it', 7, 'Tom Lee')).toEqual({
      text: 'Ask @Tom Lee  about it',
      cursor: 13,
    });
  });

  it('tells names apart that begin alike', () => {
    expect(mentionedIn('@Ada Birchwood, look', people).map((p) => p.id)).toEqual(['2']);
    expect(mentionedIn('@Ada Birch, look', people).map((p) => p.id)).toEqual(['1']);
    expect(mentionedIn('@Ada Birching', people)).toEqual([]);
  });

  it('finds whoever was put in by the picker, whatever stands around', () => {
    fc.assert(
      fc.property(fc.string(), fc.constantFrom(...people), (before, person) => {
        const text = `${before} @`;
        const put = withMention(text, text.length, person.name);
        expect(mentionedIn(put.text, people)).toContain(person);
      }),
    );
  });
});
