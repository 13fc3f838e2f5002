import { JobRefusal } from '../runtime/job-refusal.js';

const longestNameShown = 60;

/** A file name as it may stand in a sentence: last path part only, no control characters, not endless. */
export function quotedName(fileName: string): string {
  const bare = (fileName.split(/[\\/]/).at(-1) ?? '').replace(/\p{C}+/gu, ' ').trim() || 'the file';
  const letters = [...bare];
  const shown =
    letters.length <= longestNameShown
      ? bare
      : `${letters.slice(0, longestNameShown - 20).join('')}…${letters.slice(-19).join('')}`;
  return `“${shown}”`;
}

/** A whole number with its thousands set apart: 6720 → "6 720". */
export function spelledCount(count: number): string {
  return String(count).replace(/\B(?=(\d{3})+(?!\d))/g, ' ');
}

/** "1 facet", "6 720 facets"; the plural is the singular with an s unless given. */
export function countOf(count: number, singular: string, plural = `${singular}s`): string {
  return `${spelledCount(count)} ${count === 1 ? singular : plural}`;
}

export function refuseFile(fileName: string, whatIsWrong: string): JobRefusal {
  return new JobRefusal(`${quotedName(fileName)} ${whatIsWrong}`);
}
