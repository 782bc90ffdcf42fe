import type { Role } from '../../domain/access/permissions';

/** Who is signed in, as far as the shell of a page shows it. */
export interface ShellActor {
  name: string;
  initials: string;
  role: Role;
}
export type Theme = 'system' | 'light' | 'dark';
export type StaffNav =
  'fleet' | 'causes' | 'cases' | 'figures' | 'commissioning' | 'shutdown' | 'equipment' | 'people' | null;
