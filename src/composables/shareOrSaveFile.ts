import { saveFile } from './saveFile';

/**
 * Hands a file on: on phones and tablets through the system's own sharing, where it takes files of this kind;
 * everywhere else, and when sharing goes wrong, as a download. Leaving the sharing sheet is no mistake.
 */
export async function shareOrSaveFile(name: string, text: string, type: string): Promise<void> {
  const files = [new File([text], name, { type })];
  const isHandheld = window.matchMedia('(pointer: coarse)').matches;
  if (!isHandheld || !navigator.canShare?.({ files })) return saveFile(name, text, type);
  try {
    await navigator.share({ files, title: name });
  } catch (cause) {
    if (!(cause instanceof DOMException && cause.name === 'AbortError')) saveFile(name, text, type);
  }
}
