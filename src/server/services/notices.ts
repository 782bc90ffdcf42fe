import type { Actor } from '../../domain/access/permissions';
import { howOf, KINDS, kindsOf, type How } from '../../domain/notices/kinds';
import { isTimeZone } from '../../domain/notices/person-clock';
import type { ChoiceBody, ChoicesPage, NoticesPage, NoticesView } from '../../schemas/api/notices';
import type { Tx } from '../db/transaction';
import { AppError, found } from '../errors';
import { choiceOf, saveChoice, sitesToChoose } from '../queries/notice-choices';
import { noticesNow, noticesOf } from '../queries/notices';
import { addAuditEntry } from '../queries/people';
import { timeZones } from './time-zones';
import { noticeChoiceRefusals } from '../../words/refusals-people';

const A_PAGE = 50;

/** One page of one's own notices. */
export async function noticesPage(tx: Tx, actor: Actor, view: NoticesView, at: Date): Promise<NoticesPage> {
  const items = await noticesOf(tx, actor.personId, view, A_PAGE + 1);
  const shown = items.slice(0, A_PAGE);
  const { unread, hazards } = await noticesNow(tx, actor.personId);
  const choice = found(await choiceOf(tx, actor.personId), 'person');
  return {
    at: at.toISOString(),
    timeZone: choice.timeZone ?? choice.organisationZone,
    items: shown,
    next: items.length > A_PAGE ? (shown.at(-1)?.number ?? null) : null,
    unread,
    hazards,
    kinds: kindsOf(actor.role),
    sites: (await sitesToChoose(tx)).map(({ ref, name }) => ({ id: ref, name })),
  };
}

/** What one is told of, and how. */
export async function choicesPage(tx: Tx, actor: Actor, email: string, at: Date): Promise<ChoicesPage> {
  const choice = found(await choiceOf(tx, actor.personId), 'person');
  const sites = await sitesToChoose(tx);
  return {
    at: at.toISOString(),
    email,
    kinds: kindsOf(actor.role).map((kind) => ({
      kind,
      name: KINDS[kind].name,
      meaning: KINDS[kind].meaning,
      how: howOf(kind, actor.role, choice.rules),
      standard: KINDS[kind].defaults[actor.role] ?? 'nothing',
      fixed: KINDS[kind].fixed ?? null,
    })),
    sites: sites.map(({ ref, name }) => ({ id: ref, name })),
    chosenSites: choice.siteIds?.flatMap((id) => sites.find((s) => s.id === id)?.ref ?? []) ?? null,
    digestAt: choice.digestAt,
    quiet:
      choice.quietFrom === null || choice.quietTo === null
        ? null
        : { from: choice.quietFrom, to: choice.quietTo },
    timeZone: choice.timeZone,
    organisationZone: choice.organisationZone,
    timeZones: timeZones(),
  };
}

const wrong = (field: string, message: string): AppError =>
  new AppError('invalid', { message, fields: [{ field: `body.${field}`, message }] });

/**
 * Keeps what one has chosen; what is as the role has it is not kept, so that a role's new default reaches everybody.
 * @throws AppError invalid (fields `rules.KIND`, `sites`, `timeZone`)
 */
export async function saveChoices(
  tx: Tx,
  actor: Actor,
  body: ChoiceBody,
  at: Date,
  address: string | null,
): Promise<void> {
  if (body.timeZone !== null && !isTimeZone(body.timeZone))
    throw wrong('timeZone', noticeChoiceRefusals.noSuchZone);
  const mine = kindsOf(actor.role);
  const rules: Partial<Record<string, How>> = {};
  for (const [kind, how] of Object.entries(body.rules) as [(typeof mine)[number], How][]) {
    const standard = KINDS[kind].defaults[actor.role];
    if (!mine.includes(kind))
      throw wrong(`rules.${kind}`, noticeChoiceRefusals.roleNotTold(actor.role, KINDS[kind].name));
    if (KINDS[kind].fixed && how !== standard)
      throw wrong(`rules.${kind}`, noticeChoiceRefusals.fixed(KINDS[kind].name, KINDS[kind].fixed));
    if (how !== standard) rules[kind] = how;
  }
  const sites = await sitesToChoose(tx);
  const siteIds = body.sites?.map((ref) => {
    const site = sites.find((s) => s.ref === ref);
    if (!site) throw wrong('sites', noticeChoiceRefusals.siteNotOpen);
    return site.id;
  });
  const before = await choiceOf(tx, actor.personId);
  await saveChoice(
    tx,
    actor,
    {
      rules,
      siteIds: siteIds ?? null,
      digestAt: body.digestAt,
      quietFrom: body.quiet?.from ?? null,
      quietTo: body.quiet?.to ?? null,
      timeZone: body.timeZone,
    },
    at,
  );
  await addAuditEntry(tx, {
    organisationId: actor.organisationId,
    personId: actor.personId,
    address,
    action: 'account.notices_changed',
    subject: 'own account',
    before: before && {
      rules: before.rules,
      digestAt: before.digestAt,
      timeZone: before.timeZone,
      quiet: before.quietFrom === null ? null : [before.quietFrom, before.quietTo],
    },
    after: {
      rules,
      digestAt: body.digestAt,
      timeZone: body.timeZone,
      quiet: body.quiet && [body.quiet.from, body.quiet.to],
    },
  });
}
