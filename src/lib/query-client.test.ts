import { QueryObserver } from '@tanstack/react-query';
import { expect, it } from 'vitest';
import { makeQueryClient, readFailedAgain } from './query-client';

it('reads again what had failed, and leaves alone what had not', async () => {
  const client = makeQueryClient();
  const read = { failed: 0, fine: 0 };
  const observe = (name: 'failed' | 'fine') =>
    new QueryObserver(client, {
      queryKey: [name],
      retry: false,
      queryFn: () => {
        read[name] += 1;
        if (name === 'failed' && read.failed === 1) throw new Error('the database does not answer');
        return read[name];
      },
    });
  const stop = [observe('failed').subscribe(() => undefined), observe('fine').subscribe(() => undefined)];
  await expect.poll(() => client.getQueryState(['failed'])?.status).toBe('error');
  readFailedAgain(client);
  await expect.poll(() => client.getQueryState(['failed'])?.status).toBe('success');
  expect(read).toEqual({ failed: 2, fine: 1 });
  for (const one of stop) one();
  client.clear();
});
