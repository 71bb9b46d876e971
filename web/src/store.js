// The draft: what stands in the form, kept in this browser so that a reload loses nothing.
// Other local files may be able to read it, and it may be blocked; the saved sheet is the real copy.

const KEY = "quenchwright.draft";

/** The draft as it was left, or null. */
export function readDraft() {
  try {
    const draft = JSON.parse(localStorage.getItem(KEY));
    return draft && typeof draft === "object" && draft.form && typeof draft.form === "object" ? draft.form : null;
  } catch {
    return null;
  }
}

/** Keep the draft. False when the browser does not allow it. */
export function keepDraft(form) {
  try {
    localStorage.setItem(KEY, JSON.stringify({ form }));
    return true;
  } catch {
    return false;
  }
}

export function storageWorks() {
  try {
    localStorage.setItem(`${KEY}.try`, "1");
    localStorage.removeItem(`${KEY}.try`);
    return true;
  } catch {
    return false;
  }
}
