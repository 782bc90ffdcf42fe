/** The lines of an NDJSON answer, one by one as they come. */
export async function* linesOf<T>(body: ReadableStream<Uint8Array>): AsyncGenerator<T> {
  const reader = body.pipeThrough(new TextDecoderStream() as TransformStream<Uint8Array, string>).getReader();
  let rest = '';
  for (;;) {
    const { done, value } = await reader.read();
    if (done) break;
    const lines = (rest + value).split('\n');
    rest = lines.pop() ?? '';
    for (const line of lines) if (line.trim() !== '') yield JSON.parse(line) as T;
  }
  if (rest.trim() !== '') yield JSON.parse(rest) as T;
}
