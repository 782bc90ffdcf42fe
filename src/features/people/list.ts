import type { InvitationItem, PeoplePage, PeopleView, PersonItem } from '../../schemas/api/people';
import { peopleList } from '../../words/people';

export const PEOPLE_DEFAULTS: PeopleView = { q: '', role: 'all', show: 'active', sort: 'name' };

const byName = new Intl.Collator('en', { sensitivity: 'base' });

/** The people of a view: filtered and sorted; names settle what is equal. */
export function listedPeople(people: readonly PersonItem[], view: PeopleView): PersonItem[] {
  const words = view.q.trim().toLocaleLowerCase();
  return people
    .filter((p) => view.show === 'all' || p.active)
    .filter((p) => view.role === 'all' || p.role === view.role)
    .filter((p) => `${p.name} ${p.email}`.toLocaleLowerCase().includes(words))
    .sort((a, b) => {
      if (view.sort === 'seen') {
        const seen = (b.lastSeenAt ?? '').localeCompare(a.lastSeenAt ?? '');
        if (seen !== 0) return seen;
      }
      return byName.compare(a.name, b.name);
    });
}

/** Invitations that still concern somebody: open ones, and those that ran out. */
export const pending = (invitations: readonly InvitationItem[]): InvitationItem[] =>
  invitations.filter((i) => i.state === 'open' || i.state === 'expired');

export function peopleFinding({ people, invitations }: PeoplePage): { finding: string; sentence: string } {
  const active = people.filter((p) => p.active);
  const managers = active.filter((p) => p.role === 'manager');
  const open = invitations.filter((i) => i.state === 'open').length;
  const waiting = open > 0 ? ` ${peopleList.invitationsWaiting(open)}.` : '';
  return {
    finding: peopleList.whoCanSignIn(active.length),
    sentence:
      managers.length === 1
        ? peopleList.onlyManager(managers[0]?.name, waiting)
        : peopleList.managersAmongThem(managers.length, waiting),
  };
}
