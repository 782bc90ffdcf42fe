import { z } from 'zod';
import { plannedWorkFields } from '../../words/fields';

/** Planned works at a site. Entered by the clock of the site, kept in UTC. */

/** "2026-12-03T08:00", as an input of the browser gives it. */
const localTime = z.string().regex(/^\d{4}-\d{2}-\d{2}T\d{2}:\d{2}$/, plannedWorkFields.giveDateAndTime);

export const newPlannedWork = z.object({
  ref: z.uuid(), // made by the form: sent twice, kept once
  from: localTime,
  to: localTime,
  reason: z.string().trim().min(1, plannedWorkFields.sayWhatIsDone).max(500, plannedWorkFields.reasonTooLong),
  /** Public identifiers; null: the whole site. */
  strings: z.array(z.uuid()).min(1, plannedWorkFields.chooseString).max(2000).nullable(),
});
export type NewPlannedWork = z.infer<typeof newPlannedWork>;

export interface PlannedWorkItem {
  id: string;
  startsAt: string;
  endsAt: string;
  reason: string;
  /** null: the whole site. */
  strings: string[] | null;
  by: string;
  endedBy: string | null;
  state: 'to_come' | 'going_on' | 'over';
}

export interface PlannedWorksPage {
  at: string;
  site: { id: string; name: string; timeZone: string };
  works: PlannedWorkItem[];
  strings: { id: string; name: string }[];
  /** "2026-12-03T08:00" now, by the clock of the site. */
  localNow: string;
}
