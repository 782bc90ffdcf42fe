import type { QueryKey } from '@tanstack/react-query';
import { useCallback, useEffect, useState } from 'react';
import { Gather } from './gather';
import { queryClient } from './query-client';

/** However much /live tells, what it does not bring is read this often at most, ms: in an outage it tells of a site a second. */
const EVERY_MS = 5000;

/** Reads something again: at once, and what is asked for soon after together. */
export function useReadAgain(queryKey: QueryKey): () => void {
  const [gather] = useState(
    () =>
      new Gather<null>(
        () => void queryClient().invalidateQueries({ queryKey, exact: true }, { cancelRefetch: false }),
        EVERY_MS,
      ),
  );
  useEffect(() => () => gather.stop(), [gather]);
  return useCallback(() => gather.push(null), [gather]);
}
