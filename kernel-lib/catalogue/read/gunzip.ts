/** Whether bytes begin as gzip does (RFC 1952). */
export function isGzip(bytes: Uint8Array): boolean {
  return bytes[0] === 0x1f && bytes[1] === 0x8b;
}

/** The content of gzip bytes. @throws Error when they are cut short or damaged */
export async function gunzip(bytes: Uint8Array, where: string): Promise<Uint8Array> {
  const parts: Uint8Array[] = [];
  let length = 0;
  try {
    const stream = new Blob([bytes as BlobPart]).stream().pipeThrough(new DecompressionStream('gzip'));
    const reader = stream.getReader();
    for (;;) {
      const { done, value } = await reader.read();
      if (done) break;
      parts.push(value);
      length += value.length;
    }
  } catch (error) {
    throw new Error(
      `${where}: the gzip data are cut short or damaged (${(error as Error).message}). Fetch the file again.`,
    );
  }
  const out = new Uint8Array(length);
  let at = 0;
  for (const part of parts) {
    out.set(part, at);
    at += part.length;
  }
  return out;
}
