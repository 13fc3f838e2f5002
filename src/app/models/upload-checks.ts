import { maxModelBytes } from '../../../shared/api/models.contract.js';
import { writeBytes } from '../ui/format/quantities';

/** Endings of the files that are taken, for a file picker. */
export const modelEndings = '.stl,.obj,.3mf';

/**
 * What can be said about a file without sending it: a sentence why not, or null. Saves a long
 * upload; what the server says later counts all the same.
 */
export function checkBeforeSending(file: { name: string; size: number }): string | null {
  if (!/\.(stl|obj|3mf)$/i.test(file.name)) {
    return 'This is not a model: its name must end in .stl, .obj or .3mf.';
  }
  if (file.size === 0) return 'The file is empty. Export the model again.';
  if (file.size > maxModelBytes) {
    return `The file has ${writeBytes(file.size)}; at most ${writeBytes(maxModelBytes)} can be taken. Reduce the number of triangles, then export again.`;
  }
  return null;
}
