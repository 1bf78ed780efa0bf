import type { AboutCapture } from '#shared/contract/http/captures';

/** What is said for a whole batch goes to each capture; what was left open, and the subject, stay each capture's own. */
export function mergeAbout(known: AboutCapture, said: AboutCapture): AboutCapture {
  const filled = Object.entries(said).filter(
    ([name, value]) => name !== 'subject' && value !== undefined && value !== null && value !== '',
  );
  return { ...known, ...Object.fromEntries(filled) };
}
