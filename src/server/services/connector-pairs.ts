import type { Actor } from '../../domain/access/permissions';
import { isIdenticalConnector } from '../../domain/equipment/connectors';
import type { PairInput } from '../../schemas/api/equipment';
import type { Tx } from '../db/transaction';
import { AppError, found } from '../errors';
import { endPair, insertPair } from '../queries/connector-pairs';
import { connectorTypes } from '../queries/equipment';
import { addAuditEntry } from '../queries/people';
import { tellSitesUsing } from './equipment-save';
import { connectorPairRefusals } from '../../words/refusals-as-built';

/**
 * Records that two different connector types are documented as intermatable.
 * @throws AppError invalid (the same type twice, or identical types) · conflict (in force already)
 */
export async function recordPair(
  tx: Tx,
  actor: Actor,
  input: PairInput,
  address: string | null,
): Promise<{ id: string }> {
  const types = await connectorTypes(tx);
  const of = (field: 'first' | 'second') => {
    const type = types.find((t) => t.id === input[field]);
    if (type) return type;
    throw new AppError('invalid', {
      message: connectorPairRefusals.chooseBoth,
      fields: [{ field, message: connectorPairRefusals.typeGone }],
    });
  };
  const [first, second] = [of('first'), of('second')];
  if (isIdenticalConnector(first, second))
    throw new AppError('invalid', {
      message: connectorPairRefusals.sameType,
      fields: [{ field: 'second', message: connectorPairRefusals.chooseOther }],
    });
  const evidence = [
    `${input.document}, ${input.edition}, ${input.page}`,
    ...(input.note ? [input.note] : []),
  ].join('. ');
  const id = await insertPair(tx, {
    organisationId: actor.organisationId,
    first: first.dbId,
    second: second.dbId,
    evidence,
    personId: actor.personId,
  });
  if (!id)
    throw new AppError('conflict', {
      message: connectorPairRefusals.recordedAlready(first.name, second.name),
    });
  await addAuditEntry(tx, {
    organisationId: actor.organisationId,
    personId: actor.personId,
    address,
    action: 'connector_pair.record',
    subject: `connector_pair ${id}`,
    after: { first: first.name, second: second.name, evidence },
  });
  await tellSitesUsing(tx, 'connectors', first.dbId);
  await tellSitesUsing(tx, 'connectors', second.dbId);
  return { id };
}

/** Ends a pair: from now on the two count as not documented. @throws AppError not_found (or ended already) */
export async function endRecordedPair(
  tx: Tx,
  actor: Actor,
  ref: string,
  at: Date,
  address: string | null,
): Promise<void> {
  const ended = found(await endPair(tx, ref, at), 'pair in force');
  await addAuditEntry(tx, {
    organisationId: actor.organisationId,
    personId: actor.personId,
    address,
    action: 'connector_pair.end',
    subject: `connector_pair ${ref}`,
    before: { evidence: ended.evidence },
  });
  await tellSitesUsing(tx, 'connectors', ended.first);
  await tellSitesUsing(tx, 'connectors', ended.second);
}
