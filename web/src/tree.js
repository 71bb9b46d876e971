/* A tree is a list of files in one piece: the length of its JSON table of contents
 * in four bytes, the table [[path, length], ...], then the files one after the
 * other. Laid straight into Python's memory: far cheaper than unpacking a wheel. */

export const SITE = "/lib/python3.12/site-packages";

export function lay(FS, bytes) {
  const head = new DataView(bytes.buffer, bytes.byteOffset).getUint32(0, true);
  const table = JSON.parse(new TextDecoder().decode(bytes.subarray(4, 4 + head)));
  const made = new Set();
  let at = 4 + head;
  for (const [path, length] of table) {
    const folder = path.slice(0, path.lastIndexOf("/"));
    if (!made.has(folder)) FS.mkdirTree(`${SITE}/${folder}`);
    made.add(folder);
    FS.writeFile(`${SITE}/${path}`, bytes.subarray(at, at + length), { canOwn: true });
    at += length;
  }
}
