// Files in and out. Nothing from a file is ever put into the page: its text goes to the core, which reads only the job.

const MOST_BYTES = 5 * 1024 * 1024;
const KEEP_LINK_ms = 60_000;

/** Hand a file to the browser's downloads. */
export function download(filename, html) {
  const address = URL.createObjectURL(new Blob([html], { type: "text/html" }));
  const link = document.createElement("a");
  link.href = address;
  link.download = filename;
  document.body.append(link);
  link.click();
  link.remove();
  setTimeout(() => URL.revokeObjectURL(address), KEEP_LINK_ms);
}

/** The text of a file, or an error in plain words. */
export async function readSheetFile(file) {
  if (file.size > MOST_BYTES) throw new Error(`${file.name} is ${(file.size / 1048576).toFixed(1)} MB. A saved sheet is far smaller; the limit is 5 MB.`);
  if (file.size === 0) throw new Error(`${file.name} is empty.`);
  try {
    return await file.text();
  } catch {
    throw new Error(`${file.name} could not be read.`);
  }
}

/** Let a file be dropped anywhere on the page; the Open button does the same without dragging. */
export function acceptDrops(curtain, take) {
  let depth = 0;
  const carriesFile = (event) => [...(event.dataTransfer?.types ?? [])].includes("Files");
  const show = (visible) => { curtain.hidden = !visible; };
  addEventListener("dragenter", (event) => {
    if (!carriesFile(event)) return;
    event.preventDefault();
    depth += 1;
    show(true);
  });
  addEventListener("dragover", (event) => { if (carriesFile(event)) event.preventDefault(); });
  addEventListener("dragleave", (event) => {
    if (!carriesFile(event)) return;
    depth = Math.max(0, depth - 1);
    if (depth === 0) show(false);
  });
  addEventListener("drop", (event) => {
    if (!carriesFile(event)) return;
    event.preventDefault();
    depth = 0;
    show(false);
    const file = event.dataTransfer.files[0];
    if (file) take(file);
  });
}
