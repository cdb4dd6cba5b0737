/** How long the browser may take to fetch what it saves, ms. */
const KEPT_MS = 60_000;

/** Gives a text to the browser as a file of this name to keep. */
export function saveFile(name: string, text: string, type = 'application/json'): void {
  const link = document.createElement('a');
  link.href = URL.createObjectURL(new Blob([text], { type }));
  link.download = name;
  link.click();
  setTimeout(() => URL.revokeObjectURL(link.href), KEPT_MS);
}
