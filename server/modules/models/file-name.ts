/** What a file is called when nothing is left of its name. */
const NAMELESS = 'model.stl';
const LONGEST = 200;

/** Control characters, and marks that turn the reading direction: they hide what a name says. */
// eslint-disable-next-line no-control-regex
const INVISIBLE = /[\u0000-\u001f\u007f-\u009f\u200b-\u200f\u202a-\u202e\u2060-\u2069\ufeff]/g;

/**
 * A person's file name as it is safe to show and to send back: no folder in front, nothing
 * invisible, at most 200 characters with the ending kept. It never names a file on our disk.
 */
export function cleanFileName(given: string): string {
  const last = given.normalize('NFC').split(/[/\\]/).at(-1) ?? '';
  const shown = last.replace(INVISIBLE, '').replace(/\s+/g, ' ').trim();
  if (shown === '' || /^\.+$/.test(shown)) return NAMELESS;
  return shorten(shown);
}

/** Counts whole characters: half a surrogate pair is no text. */
function shorten(name: string): string {
  const letters = [...name];
  if (letters.length <= LONGEST) return name;
  const ending = /\.[A-Za-z0-9]{1,8}$/.exec(name)?.[0] ?? '';
  return letters.slice(0, LONGEST - ending.length - 1).join('') + '…' + ending;
}

/** A first name for the model: its file's name without the ending. */
export function modelNameOf(fileName: string): string {
  const stem = fileName.replace(/\.[A-Za-z0-9]{1,8}$/, '').trim() || fileName;
  return [...stem].slice(0, 120).join('').trim();
}
