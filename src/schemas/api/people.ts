import { z } from 'zod';
import { ROLES } from '../../domain/access/permissions';
import { id } from './now';

/** People of an organisation and their invitations. Times ISO 8601 in UTC. */

const time = z.iso.datetime();
const email = z
  .string({ error: 'Give an e-mail address.' })
  .trim()
  .max(254, 'Use at most 254 characters.')
  .regex(/^[^\s@<>"]+@[^\s@<>"]+\.[^\s@<>"]+$/, 'This is no e-mail address: name@place.example');
const name = z
  .string({ error: 'Give the name.' })
  .trim()
  .min(2, 'Give the name.')
  .max(120, 'Use at most 120 characters.')
  .refine((text) => !/\p{C}/u.test(text), 'Leave control characters out.');
const role = z.enum(ROLES, { error: 'Choose a role.' });
const sites = z.array(id).max(500, 'At most 500 sites.');

export const personItem = z.object({
  id,
  name: z.string(),
  email: z.string(),
  role,
  active: z.boolean(),
  lastSeenAt: time.nullable(),
  deactivatedAt: time.nullable(),
  secondFactor: z.boolean(),
  sites: z.array(id), // what a customer sees; staff see all
  self: z.boolean(),
  /** Tokens in force, and when the last of them was used. */
  tokens: z.int(),
  tokensUsedAt: time.nullable(),
});
export type PersonItem = z.infer<typeof personItem>;

export const invitationItem = z.object({
  id,
  name: z.string(),
  email: z.string(),
  role,
  sites: z.array(id),
  invitedBy: z.string(),
  createdAt: time,
  expiresAt: time,
  state: z.enum(['open', 'expired', 'accepted', 'ended']),
});
export type InvitationItem = z.infer<typeof invitationItem>;

export const peoplePage = z.object({
  at: time,
  people: z.array(personItem),
  invitations: z.array(invitationItem),
  sites: z.array(z.object({ id, name: z.string() })),
});
export type PeoplePage = z.infer<typeof peoplePage>;

export const inviteBody = z.strictObject({ name, email, role, sites: sites.default([]) });
export type Invite = z.infer<typeof inviteBody>;

export const personChange = z.strictObject({
  name: name.optional(),
  role: role.optional(),
  sites: sites.optional(),
  active: z.boolean().optional(),
});
export type PersonChange = z.infer<typeof personChange>;

export const personParams = z.strictObject({ person: id });
export const invitationParams = z.strictObject({ invitation: id });

export const peopleView = z.object({
  q: z.string().max(80).catch(''),
  role: z.enum(['all', ...ROLES]).catch('all'),
  show: z.enum(['active', 'all']).catch('active'),
  sort: z.enum(['name', 'seen']).catch('name'),
});
export type PeopleView = z.infer<typeof peopleView>;

export { email as emailField, name as nameField };
