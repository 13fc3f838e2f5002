/**
 * An error as one sentence on one line. Several sentences are joined by semicolons (what stands
 * between quotation marks is left alone); line ends and other control characters become spaces; a
 * missing full stop is added.
 */
export function oneSentence(message: string): string {
  const line = message.replace(/\p{Cc}+/gu, ' ').trim();
  const joined = line.replace(
    /“[^”]*”|[.!?]\s+(\p{Lu})(?=\p{Ll}|\s)/gu,
    (found, letter: string | undefined) => (letter ? `; ${letter.toLowerCase()}` : found),
  );
  return /[.!?]$/.test(joined) ? joined : `${joined}.`;
}
