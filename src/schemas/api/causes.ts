import { z } from 'zod';
import { CAUSE_KINDS, type CauseKind } from '../../domain/causes/kinds';
import type { EventItem } from './now';
import type { SiteContact } from './fleet';
import type { PlannedWorkItem } from './planned-works';

/** Causes as they are written down. Energy in Wh; times ISO 8601 in UTC. */

export const CAUSE_SHOWS = ['open', 'over', 'all'] as const;
export const CAUSE_SORTS = ['gravity', 'newest', 'oldest', 'loss'] as const;

export const causesView = z.object({
  show: z.enum(CAUSE_SHOWS).catch('open'),
  kind: z.enum(['any', ...CAUSE_KINDS]).catch('any'),
  site: z.uuid().optional().catch(undefined),
  q: z.string().trim().max(120).catch(''),
  sort: z.enum(CAUSE_SORTS).catch('gravity'),
});
export type CausesView = z.infer<typeof causesView>;

export interface CauseUnitItem {
  stringId: string;
  stringName: string;
  position: number | null;
  serial: string | null;
  since: string;
}

export interface CauseItem {
  id: string;
  kind: CauseKind;
  hazard: boolean;
  headline: string;
  siteId: string;
  siteName: string;
  timeZone: string;
  since: string;
  openedAt: string;
  closedAt: string | null;
  reopened: number;
  confidence: number;
  units: CauseUnitItem[];
  lossWhDay: number | null;
  lossWh: number;
  /** In the organisation's currency at the price of now; null: no price, or no currency. */
  lossMoney: number | null;
  lossMoneyDay: number | null;
  acknowledged: { person: string; at: string } | null;
  openCase: { id: string; number: number } | null;
}

export interface CausesPage {
  at: string;
  view: CausesView;
  causes: CauseItem[];
  /** More fit than are shown. */
  more: boolean;
  /** Sites that have or had a cause, for the filter. */
  sites: { id: string; name: string }[];
  currency: string | null;
}

export interface CausePage extends CauseItem {
  at: string;
  key: string;
  sharedPart: { kind: string; name: string } | null;
  evidence: string;
  alternatives: string[];
  figures: Record<string, unknown>;
  currency: string | null;
  contact: SiteContact | null;
  clearSince: string | null;
  events: EventItem[];
  /** What to look at before calling anybody. */
  checks: { check: string; why: string; caution: string | null }[];
  checksSource: string;
}

/** What a site's page shows beside the moment. */
export interface SiteStanding {
  works: PlannedWorkItem[];
  /** Open causes that days show, not minutes. */
  daily: Pick<CauseItem, 'id' | 'headline' | 'since' | 'lossWhDay'>[];
}
