/** Who may do what: the one table. Customers see only sites that they were given; staff all of their organisation's. */

export const ROLES = ['manager', 'technician', 'analyst', 'customer'] as const;
export type Role = (typeof ROLES)[number];

const STAFF = ['manager', 'technician', 'analyst'] as const;

export const PERMISSIONS = {
  'own_account.use': ROLES,
  'fleet.read': STAFF,
  'site.read': STAFF,
  'string.read': STAFF,
  'telemetry.export': STAFF,
  'shutdown.read': STAFF,
  'hazard.acknowledge': STAFF,
  'roll_call.read': STAFF,
  'roll_call.run': ['manager', 'technician'],
  'customer_page.read': ROLES,
  'status.read': ['manager'],
  'reading.try': STAFF,
  'methods.read': ROLES,
} as const satisfies Record<string, readonly Role[]>;

export type Permission = keyof typeof PERMISSIONS;

export interface Actor {
  personId: number;
  organisationId: number;
  role: Role;
  /** Sites that this person sees; `all`: every site of the organisation. */
  sites: 'all' | readonly number[];
}

export const mayUse = (role: Role, permission: Permission): boolean =>
  (PERMISSIONS[permission] as readonly Role[]).includes(role);
