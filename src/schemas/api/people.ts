import { z } from 'zod';
import { ROLES } from '../../domain/access/permissions';
import { id } from './now';
import { peopleFields } from '../../words/fields';

/** People of an organisation and their invitations. Times ISO 8601 in UTC. */

const time = z.iso.datetime();
const email = z
  .string({ error: peopleFields.giveEmail })
  .trim()
  .max(254, peopleFields.emailTooLong)
  .regex(/^[^\s@<>"]+@[^\s@<>"]+\.[^\s@<>"]+$/, peopleFields.noEmail);
const name = z
  .string({ error: peopleFields.giveName })
  .trim()
  .min(2, peopleFields.giveName)
  .max(120, peopleFields.nameTooLong)
  .refine((text) => !/\p{C}/u.test(text), peopleFields.noControlCharacters);
const role = z.enum(ROLES, { error: peopleFields.chooseRole });
const sites = z.array(id).max(500, peopleFields.tooManySites);

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
