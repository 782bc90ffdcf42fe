import { describe, expect, it } from 'vitest';
import { CASE_KINDS } from './cases';
import { checklistItem, checklistLines, checklistOf } from './checklists';

describe('checklists', () => {
  it.each(CASE_KINDS)('of %s: some lines, each once, each with its reason', (kind) => {
    const lines = checklistOf(kind);
    expect(lines.length).toBeGreaterThanOrEqual(3);
    expect(new Set(lines.map((l) => l.key)).size).toBe(lines.length);
    for (const line of lines) {
      expect(line.why.length).toBeGreaterThan(20);
      expect(checklistItem(line.key)).toEqual(line);
    }
  });

  it('cautions wherever a connector, a lead, a fuse or a meter is handled', () => {
    for (const kind of CASE_KINDS)
      for (const line of checklistOf(kind))
        if (/connector|lead|fuse|reading at|meter$|wired|isolated/i.test(line.check))
          expect(line.caution, line.key).toBeTruthy();
  });

  it('never says that something is safe', () => {
    for (const kind of CASE_KINDS)
      expect(JSON.stringify(checklistOf(kind))).not.toMatch(/\bsafe\b|de-energi[sz]ed|harmless/i);
  });

  it('knows no line that is not there', () => {
    expect(checklistItem('toString')).toBeUndefined();
  });

  it('keep a line of another kind that somebody has ticked, and only then', () => {
    const keys = (marks: { key: string; done: boolean }[]) =>
      checklistLines('wrong_string', marks).map(({ key, own }) => [key, own]);
    const own = checklistOf('wrong_string').map(({ key }) => [key, true]);
    expect(keys([{ key: 'roster', done: true }])).toEqual(own);
    expect(
      keys([
        { key: 'soiling', done: true },
        { key: 'fuses', done: false },
        { key: 'gone', done: true },
      ]),
    ).toEqual([...own, ['soiling', false]]);
  });
});
