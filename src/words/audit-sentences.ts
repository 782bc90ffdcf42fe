import type { AUDIT_AREAS, AuditItem } from '../schemas/api/audit';

export const AREA_WORDS: Record<(typeof AUDIT_AREAS)[number], string> = {
  people: 'people',
  account: 'own accounts',
  share: 'shared pages',
  as_built: 'as-built',
  equipment: 'equipment',
  checks: 'install checks',
  commissioning: 'commissioning',
  roll_call: 'roll call',
  shutdown_test: 'shutdown tests',
  handover: 'handover',
  hazard: 'hazards',
  case: 'cases',
  webhook: 'webhooks',
  history: 'earlier readings',
  settings: 'settings',
  tariff: 'prices',
  isolation: 'isolation',
  jobs: 'background jobs',
  annotation: 'notes',
  planned_work: 'planned works',
};

const ACTIONS: Record<string, string> = {
  'settings.organisation': 'changed the organisation’s settings',
  'settings.thresholds': 'changed thresholds',
  'settings.logo': 'changed the logo',
  'tariff.set': 'set a price a kWh',
  'tariff.removed': 'took a price a kWh away',
  'people.invited': 'invited somebody',
  'people.invitation_ended': 'ended an invitation',
  'people.joined': 'accepted an invitation',
  'people.changed': 'changed a person',
  'people.deactivated': 'deactivated a person',
  'people.reactivated': 'let a person in again',
  'account.password_changed': 'changed their password',
  'account.password_reset': 'set a new password by letter',
  'account.notices_changed': 'changed what they are told of',
  'webhook.made': 'added a webhook',
  'webhook.changed': 'changed a webhook',
  'webhook.removed': 'removed a webhook',
  'webhook.sent_again': 'sent a call again',
  'account.email_asked': 'asked for a new address',
  'account.email_changed': 'changed their address',
  'account.sessions_ended': 'signed other devices out',
  'account.token_made': 'made a token',
  'account.token_ended': 'ended a token of theirs',
  'account.token_wrote': 'wrote by a token',
  'people.tokens_ended': 'ended the tokens of a person',
  'account.second_factor_begun': 'put a second factor in force',
  'account.second_factor_ended': 'ended their second factor',
  'case.opened': 'opened a case',
  'case.changed': 'changed a case',
  'case.checked': 'went through a checklist',
  'case.commented': 'wrote in a case',
  'case.photo': 'added a photo to a case',
  'case.closed': 'closed a case',
  'case.reopened': 'opened a case again',
  'planned_work.add': 'planned works',
  'planned_work.end': 'ended planned works',
  'annotation.pinned': 'pinned a note',
  'annotation.removed': 'took a note away',
  'annotation.restored': 'put a note back',
  'jobs.retry': 'had a background job tried again',
  'share.made': 'made a shared page',
  'share.ended': 'ended a shared page',
  'as_built.site_added': 'began a site',
  'as_built.site_changed': 'changed a site',
  'as_built.string_added': 'added a string',
  'as_built.string_changed': 'changed a string',
  'as_built.slots_changed': 'changed slots',
  'as_built.token_made': 'made a logger token',
  'as_built.token_ended': 'ended a logger token',
  'history.imported': 'imported earlier readings',
  'history.undone': 'took imported readings back',
  'as_built.unit_placed': 'placed a unit',
  'as_built.unit_moved': 'moved a unit',
  'as_built.unit_replaced': 'replaced a unit',
  'as_built.unit_removed': 'removed a unit',
  'equipment.create': 'added a type of equipment',
  'equipment.change': 'changed a type of equipment',
  'equipment.archive': 'archived a type of equipment',
  'equipment.restore': 'took a type of equipment out of the archive',
  'connector_pair.record': 'recorded a connector pair',
  'connector_pair.end': 'ended a connector pair',
  'connector_pair.file': 'kept the document of a connector pair',
  'isolation.start': 'began to watch an isolated string',
  'isolation.stop': 'ended the watch of an isolated string',
  'hazard.acknowledge': 'acknowledged a hazard',
  'roll_call.start': 'started a roll call',
  'roll_call.stop': 'stopped a roll call',
  'checks.sign_off': 'signed the install checks of a string',
  'commissioning.gap_accepted': 'accepted a gap as it is',
  'handover.made': 'made a handover pack',
  'shutdown_test.start': 'started a shutdown test',
  'shutdown_test.end': 'ended a shutdown test without a signature',
  'shutdown_test.sign': 'signed a shutdown test',
};

/** The parts of an as-built are added, changed and deleted alike: "added a plane". */
const PART_ACTION = /^as_built\.([a-z]+)_(added|changed|deleted)$/;

/** What was done, in words; what has none yet says its own name plainly. */
export function actionWords(action: string): string {
  const known = ACTIONS[action];
  if (known) return known;
  const [, part, done] = PART_ACTION.exec(action) ?? [];
  if (part && done) return `${done} ${/^[aeiou]/.test(part) ? 'an' : 'a'} ${part}`;
  return action.replaceAll('.', ': ').replaceAll('_', ' ');
}

/** What it was done to, without the marks that only machines read. */
export const subjectWords = (subject: string): string =>
  subject
    .replace(/\s*\b[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}\b/g, '')
    .replaceAll('_', ' ')
    .trim();

/** "moduleType" as "module type". */
const fieldWords = (field: string): string =>
  field
    .replace(/([a-z])([A-Z])/g, '$1 $2')
    .replaceAll('_', ' ')
    .toLowerCase();

const said = (value: unknown): string =>
  value === null || value === undefined
    ? 'nothing'
    : typeof value === 'string'
      ? /^[a-z]+(_[a-z]+)+$/.test(value)
        ? value.replaceAll('_', ' ')
        : value
      : typeof value === 'boolean'
        ? value
          ? 'yes'
          : 'no'
        : Array.isArray(value)
          ? value.map(said).join('; ')
          : typeof value === 'object'
            ? Object.entries(value)
                .filter(([, v]) => v !== null && v !== '')
                .map(([key, v]) => `${fieldWords(key)} ${said(v)}`)
                .join(', ')
            : String(value);

const fieldsOf = (value: unknown): Record<string, unknown> =>
  typeof value === 'object' && value !== null && !Array.isArray(value)
    ? (value as Record<string, unknown>)
    : value === null || value === undefined
      ? {}
      : { value };

/** What changed, field by field: only what differs where there is a before and an after. */
export function changesOf({ before, after }: Pick<AuditItem, 'before' | 'after'>): {
  field: string;
  before: string | null;
  after: string | null;
}[] {
  const old = fieldsOf(before);
  const now = fieldsOf(after);
  return [...new Set([...Object.keys(old), ...Object.keys(now)])].flatMap((field) => {
    const was = field in old ? said(old[field]) : null;
    const is = field in now ? said(now[field]) : null;
    return was === is || (was === null && is === 'nothing')
      ? []
      : [
          {
            field: fieldWords(field),
            before: was,
            after: is,
          },
        ];
  });
}
