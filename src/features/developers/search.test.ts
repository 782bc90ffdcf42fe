import { describe, expect, it } from 'vitest';
import type { OperationShown } from '../../schemas/api/developers';
import { groupsOf, operationsFound } from './search';

const operation = (id: string, group: string, more: Partial<OperationShown> = {}): OperationShown => ({
  id,
  group,
  method: 'GET',
  path: `/${id}`,
  summary: '',
  words: '',
  scope: null,
  takes: [],
  answers: [],
  curl: '',
  ...more,
});
const all = [
  operation('sites', 'Plant', { summary: 'Sites, with what they make now' }),
  operation('units', 'Units', {
    takes: [{ name: 'serial', where: 'query', required: false, type: 'text', words: 'As printed' }],
  }),
  operation('strings', 'Plant'),
];

describe('the search of the page', () => {
  it('finds by any word of an operation, all of them at once', () => {
    expect(operationsFound(all, 'SERIAL').map((o) => o.id)).toEqual(['units']);
    expect(operationsFound(all, 'plant make').map((o) => o.id)).toEqual(['sites']);
    expect(operationsFound(all, ' ')).toHaveLength(3);
    expect(operationsFound(all, 'nothing like it')).toEqual([]);
  });
  it('keeps groups together', () => {
    expect(groupsOf(all).map((g) => [g.group, g.operations.length])).toEqual([
      ['Plant', 2],
      ['Units', 1],
    ]);
  });
});
