import type { Actor } from '../../domain/access/permissions';
import type { PlaceBody, PlaceReply } from '../../schemas/api/placing';
import type { Tx } from '../db/transaction';
import { AppError, found } from '../errors';
import { visibleSite } from '../queries/visible-site';
import { placeUnits } from './place-units';
import { placeHeardRefusals } from '../../words/refusals-as-built';

/** How many slots each kind changes. */
const SLOTS: Record<PlaceBody['kind'], number> = { place: 1, replace: 1, swap: 2, move: 2 };

function check(body: PlaceBody): void {
  const refuse = (field: string, message: string): never => {
    throw new AppError('invalid', { message, fields: [{ field, message }] });
  };
  const { kind, slots } = body;
  if (slots.length !== SLOTS[kind]) refuse('slots', placeHeardRefusals.slots[kind]);
  const [one, two] = slots;
  if (kind === 'place' && one?.expected !== null) refuse('slots.0.serial', placeHeardRefusals.slotTaken);
  if (kind === 'replace' && (one?.expected === null || one?.serial === null))
    refuse('slots.0.serial', placeHeardRefusals.giveOldSerial);
  if (one && two && one.string === two.string && one.position === two.position)
    refuse('slots.1.position', placeHeardRefusals.chooseTwo);
  if (
    kind === 'swap' &&
    (one?.serial !== two?.expected || two?.serial !== one?.expected || one?.serial === null)
  )
    refuse('slots.1.serial', placeHeardRefusals.swapNeeds);
  if (kind === 'move' && (one?.serial !== null || two?.serial !== one.expected || two?.expected !== null))
    refuse('slots.1.serial', placeHeardRefusals.moveNeeds);
}

/**
 * Writes what somebody read on the roof: an unknown serial placed, a unit replaced, two swapped, one moved. The old
 * units' lives stay in the history; what was seen on the module goes with the reason.
 *
 * @throws AppError not_found · invalid · conflict (somebody changed the slot meanwhile, or the serial sits elsewhere)
 */
export async function placeHeard(
  tx: Tx,
  actor: Actor,
  siteRef: string,
  body: PlaceBody,
  at: Date,
  address: string | null,
): Promise<PlaceReply> {
  const site = found(await visibleSite(tx, siteRef), 'site');
  check(body);
  const done = await placeUnits(
    tx,
    actor,
    site.id,
    body.slots.map((s) => ({
      slot: { string: s.string, position: s.position },
      serial: s.serial,
      expected: s.expected,
    })),
    {
      at,
      reason: placeHeardRefusals.reasonAndSeen(body.reason, body.seen),
      source: 'roll_call',
      move: body.kind === 'swap' || body.kind === 'move',
      address,
    },
  );
  return done;
}
