import { z } from 'zod';
import type { SignedTest } from '../../schemas/api/shutdown-test';

const thisVersion = z.looseObject({ version: z.literal(1) });

/** What was signed; null: a record from before tests were signed here, which says less. */
export const signedContent = (detail: unknown): SignedTest | null =>
  thisVersion.safeParse(detail).success ? (detail as SignedTest) : null;
