import type { Role } from '../../domain/access/permissions';

/** Who is signed in, as far as the shell of a page shows it. */
export interface ShellActor {
  name: string;
  initials: string;
  role: Role;
  /** Notices not read yet, at most a hundred. */
  unread: number;
  /** Not shutting down, unread and not over. */
  hazards: number;
}
export type Theme = 'system' | 'light' | 'dark';
export type StaffNav =
  'fleet' | 'causes' | 'cases' | 'figures' | 'commissioning' | 'shutdown' | 'equipment' | 'people' | null;
