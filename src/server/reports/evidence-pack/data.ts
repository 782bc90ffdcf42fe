import type { CasePage } from '../../../schemas/api/cases';
import type { EventItem } from '../../../schemas/api/now';
import type { StringHistory } from '../../../schemas/api/string';
import type { PackData } from '../handover/data';

/** What the evidence of a case says. Only strings that the case is about; where it names none, the site as a whole. */
export interface EvidenceString {
  id: string;
  name: string;
  built: PackData['strings'][number];
  /** null: beyond the strings that are drawn. */
  drawn: {
    /** Volts through the day on which the case was opened. */
    day: StringHistory;
    /** Watts of the seven days up to it. */
    week: StringHistory;
  } | null;
}

export interface Evidence {
  case: CasePage['case'];
  entries: CasePage['entries'];
  photos: CasePage['photos'];
  contact: CasePage['contact'];
  organisation: { name: string; phone: string | null };
  place: string;
  ruleSet: string;
  /** All of the case; those up to a bound are drawn one by one. */
  strings: EvidenceString[];
  meterReadings: PackData['readings'];
  events: EventItem[];
}

export interface EvidenceAbout {
  at: Date;
  madeBy: string;
  fingerprint: string;
}
