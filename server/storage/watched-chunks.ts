/** Hands chunks on and shows each to `see` first. */
export async function* watchedChunks(
  chunks: AsyncIterable<Buffer>,
  see: (chunk: Buffer) => void,
): AsyncGenerator<Buffer> {
  for await (const chunk of chunks) {
    see(chunk);
    yield chunk;
  }
}
