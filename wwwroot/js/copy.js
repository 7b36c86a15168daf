// Puts text on the clipboard; false where the browser refuses (no permission, or a page that is not secure).
export async function copy(text) {
  try {
    await navigator.clipboard.writeText(text);
    return true;
  } catch {
    return false;
  }
}
