// Base64 and gzip, by the browser's own means where it has them. Used by the page, the worker and Node.

export function fromBase64(text) {
  if (Uint8Array.fromBase64) return Uint8Array.fromBase64(text);
  const binary = atob(text);
  const bytes = new Uint8Array(binary.length);
  for (let i = 0; i < binary.length; i++) bytes[i] = binary.charCodeAt(i);
  return bytes;
}

/** A stream of the unpacked bytes. Made by hand: WebKit's workers cannot read Blobs from file://. */
export function gunzip(bytes) {
  const packed = new ReadableStream({
    start(controller) {
      controller.enqueue(bytes);
      controller.close();
    },
  });
  return packed.pipeThrough(new DecompressionStream("gzip"));
}

/** The unpacked bytes in one buffer of the size they must have, which also proves that nothing is missing. */
export async function gunzipTo(size, bytes, name) {
  const whole = new Uint8Array(size);
  const reader = gunzip(bytes).getReader();
  let at = 0;
  for (;;) {
    const { done, value } = await reader.read();
    if (done) break;
    if (at + value.length > size) throw new Error(`${name} is longer than its ${size} bytes`);
    whole.set(value, at);
    at += value.length;
  }
  if (at !== size) throw new Error(`${name} has ${at} of ${size} bytes`);
  return whole;
}
