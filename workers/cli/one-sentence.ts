/**
 * An error as one sentence on one line. Several sentences are joined by semicolons (what stands
 * between quotation marks is left alone); line ends and other control characters become spaces; a
 * missing full stop is added.
 */
export function oneSentence(message: string): string {
  const line = message.replace(/\p{Cc}+/gu, ' ').trim();
  const joined = line.replace(/“[^”]*”|[.!?]\s+(?=[\p{Lu}\d“])/gu, (found) =>
    found.startsWith('“') ? found : '; ',
  );
  const lowered = joined.replace(/“[^”]*”|; (\p{Lu})(?=\p{Ll}|\s)/gu, (found, letter?: string) =>
    letter ? `; ${letter.toLowerCase()}` : found,
  );
  return /[.!?]$/.test(lowered) ? lowered : `${lowered}.`;
}
