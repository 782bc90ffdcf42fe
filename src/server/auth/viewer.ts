import type { Role } from '../../domain/access/permissions';

export type Theme = 'system' | 'light' | 'dark';

/** The signed-in person as the page shells show them. */
export interface Viewer {
  /** Public identifier. */
  id: string;
  name: string;
  initials: string;
  email: string;
  role: Role;
  organisationName: string;
  /** Of the organisation: for times that belong to no site. */
  timeZone: string;
  /** How temperatures are read. */
  units: 'metric' | 'imperial';
  theme: Theme;
  /** Notices not read yet, at most a hundred. */
  unread: number;
  /** Not shutting down, unread and not over. */
  hazards: number;
}

/** First letters of the first and the last name, at most two. */
export function initialsOf(name: string): string {
  const words = name.trim().split(/\s+/);
  const letters = words.length > 1 ? [words[0], words.at(-1)] : [words[0]];
  return letters.map((w) => [...(w ?? '')][0]?.toUpperCase() ?? '').join('');
}
