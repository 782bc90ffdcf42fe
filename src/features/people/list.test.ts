import { describe, expect, it } from 'vitest';
import type { PeoplePage, PersonItem } from '../../schemas/api/people';
import { listedPeople, PEOPLE_DEFAULTS, peopleFinding, pending } from './list';

const ID = '00000000-0000-4000-8000-000000000001';
const person = (name: string, more: Partial<PersonItem> = {}): PersonItem => ({
  id: ID,
  name,
  email: `${name.toLowerCase()}@lowfield.example`,
  role: 'technician',
  active: true,
  lastSeenAt: null,
  deactivatedAt: null,
  secondFactor: false,
  sites: [],
  self: false,
  tokens: 0,
  tokensUsedAt: null,
  ...more,
});
const names = (people: PersonItem[], view: Partial<typeof PEOPLE_DEFAULTS>) =>
  listedPeople(people, { ...PEOPLE_DEFAULTS, ...view }).map((p) => p.name);

describe('the list of people', () => {
  const people = [
    person('Vera', { lastSeenAt: '2026-12-01T10:00:00.000Z' }),
    person('Ada', { role: 'manager' }),
    person('Bo', { active: false }),
  ];
  it('leaves out who is deactivated, unless asked', () => {
    expect(names(people, {})).toEqual(['Ada', 'Vera']);
    expect(names(people, { show: 'all' })).toEqual(['Ada', 'Bo', 'Vera']);
  });
  it('finds by name, address and role, and sorts by last seen', () => {
    expect(names(people, { q: 'VERA@' })).toEqual(['Vera']);
    expect(names(people, { role: 'manager' })).toEqual(['Ada']);
    expect(names(people, { sort: 'seen' })).toEqual(['Vera', 'Ada']);
  });
});

describe('the heading', () => {
  const page = (people: PersonItem[]): PeoplePage => ({
    at: '2026-12-01T10:00:00.000Z',
    people,
    invitations: [],
    sites: [],
  });
  it('warns where one manager is alone', () => {
    const words = peopleFinding(page([person('Ada', { role: 'manager' }), person('Bo')]));
    expect(words.finding).toBe('Two people can sign in');
    expect(words.sentence).toContain('Ada is the only manager');
  });
  it('counts managers otherwise', () => {
    const two = [person('Ada', { role: 'manager' }), person('Bo', { role: 'manager' })];
    expect(peopleFinding(page(two)).sentence).toBe('2 of them are managers.');
  });
});

it('keeps open and expired invitations in view', () => {
  const invitation = (state: 'open' | 'expired' | 'accepted' | 'ended') => ({
    id: ID,
    name: 'Cy',
    email: 'cy@lowfield.example',
    role: 'analyst' as const,
    sites: [],
    invitedBy: 'Ada',
    createdAt: '2026-12-01T10:00:00.000Z',
    expiresAt: '2026-12-08T10:00:00.000Z',
    state,
  });
  expect(pending([invitation('open'), invitation('accepted'), invitation('expired')])).toHaveLength(2);
});
