import { randomUUID } from 'node:crypto';
import type { OperationShown } from '../../schemas/api/developers';
import type { Tx } from '../db/transaction';
import { casesFrom } from '../queries/v1-cases';
import { exampleOfPlant } from '../queries/v1-plant';
import { shutdownTestsFrom } from '../queries/v1-history';
import { exampleValues } from '../v1/curl';
import { operationsShown } from '../v1/shown';
import { causesNow } from './causes';

/** The API with examples that name what the reader sees: they can be tried as they stand. */
export async function developersPage(tx: Tx, origin: string, at: Date): Promise<OperationShown[]> {
  const plant = await exampleOfPlant(tx);
  const [test] = await shutdownTestsFrom(tx, {}, null, 1);
  const [cause] = await causesNow(tx, at);
  const [opened] = await casesFrom(tx, {}, null, 1);
  const others = { cause, test: test?.id, case: opened?.id };
  return operationsShown(origin, exampleValues(at, plant, others), randomUUID);
}
