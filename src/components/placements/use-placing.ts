import { useMutation } from '@tanstack/react-query';
import { api } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import type { PlaceBody, PlaceReply } from '../../schemas/api/placing';
import { paths } from '../../schemas/paths';

/** Writes a change of places; `onDone` then reads the page again. */
export const usePlacing = (siteId: string, onDone: (body: PlaceBody) => void) =>
  useMutation(
    {
      mutationFn: (body: PlaceBody) =>
        api<PlaceReply>(paths.api.rollCallPlace(siteId), { method: 'POST', body }),
      onSuccess: (_reply, body) => onDone(body),
    },
    queryClient(),
  );
