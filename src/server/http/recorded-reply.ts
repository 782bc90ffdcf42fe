/** 201 for what was stored now, 200 for what was there already: the record either way. */
export const recordedReply = ({ record, made }: { record: unknown; made: boolean }): Response =>
  new Response(JSON.stringify(record), {
    status: made ? 201 : 200,
    headers: { 'content-type': 'application/json', 'cache-control': 'no-store' },
  });
