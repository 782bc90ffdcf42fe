/** Who may do what: the one table. Customers see only sites that they were given; staff all of their organisation's. */

export const ROLES = ['manager', 'technician', 'analyst', 'customer'] as const;
export type Role = (typeof ROLES)[number];

const STAFF = ['manager', 'technician', 'analyst'] as const;
const ON_SITE = ['manager', 'technician'] as const;

export const PERMISSIONS = {
  'own_account.use': ROLES,
  'fleet.read': STAFF,
  'site.read': STAFF,
  'string.read': STAFF,
  'telemetry.export': STAFF,
  'shutdown.read': STAFF,
  'hazard.acknowledge': STAFF,
  'roll_call.read': STAFF,
  'roll_call.run': ON_SITE,
  'equipment.read': STAFF,
  'equipment.write': ON_SITE,
  'connector_evidence.record': ['manager'],
  'as_built.read': STAFF,
  'as_built.write': ON_SITE,
  'checks.read': STAFF,
  'checks.write': ON_SITE,
  'attachment.read': STAFF,
  'shutdown_test.read': STAFF,
  'shutdown_test.run': ON_SITE,
  'handover.read': STAFF,
  'handover.make': ON_SITE,
  'gap.accept': ['manager'],
  'papers.read': ROLES,
  'mail.read': ['manager'],
  'api_token.use': STAFF,
  'people.manage': ['manager'],
  'share.manage': ['manager'],
  'audit.read': ['manager'],
  'cause.read': STAFF,
  'case.read': STAFF,
  'case.write': STAFF,
  'case.report': ROLES,
  'planned_work.write': STAFF,
  'annotation.read': STAFF,
  'annotation.write': STAFF,
  'saved_view.use': STAFF,
  'figures.read': STAFF,
  'tariff.write': ['manager'],
  'notice.read': ROLES,
  'webhook.manage': ['manager'],
  'jobs.read': ['manager'],
  'jobs.retry': ['manager'],
  'settings.read': STAFF,
  'settings.write': ['manager'],
  'logger.read': STAFF,
  'logger_token.manage': ON_SITE,
  'history.import': ['manager', 'analyst'],
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
