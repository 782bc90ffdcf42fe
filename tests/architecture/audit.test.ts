import { describe, expect, it } from 'vitest';
import { AUDIT_AREAS } from '../../src/schemas/api/audit';
import { actionWords } from '../../src/words/audit-sentences';
import { sources } from './sources';

describe('what goes on record', () => {
  const actions = [
    ...new Set(
      sources()
        .filter((s) => s.file.startsWith('src/server/'))
        .flatMap((s) => [...s.text.matchAll(/\baction: '([a-z_]+\.[a-z_]+)'/g)].map((m) => m[1] ?? '')),
    ),
  ].sort();

  it('is told in words of its own, and can be found by its area', () => {
    expect(actions.length).toBeGreaterThan(30);
    const bare = actions.filter((a) => actionWords(a) === a.replaceAll('.', ': ').replaceAll('_', ' '));
    expect(bare).toEqual([]);
    const areas: readonly string[] = [...AUDIT_AREAS, 'connector_pair'];
    expect(actions.filter((a) => !areas.includes(a.split('.')[0] ?? ''))).toEqual([]);
  });
});
