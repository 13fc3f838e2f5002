/**
 * The colour-blind-safe palette of Okabe and Ito (Color Universal Design, 2008) without its black,
 * in an order that keeps the first tints far apart.
 */
export const okabeIto = [
  '#56B4E9',
  '#E69F00',
  '#009E73',
  '#CC79A7',
  '#F0E442',
  '#0072B2',
  '#D55E00',
] as const;

/** Share of the pure colour that is left in a tint; the rest is white (or slate on a dark sheet). */
const COLOUR_SHARE = 0.42;

/** A tint of a palette colour: `#RRGGBB`, mixed with `towards` in sRGB. */
export function tintOf(colour: string, towards: string, share = COLOUR_SHARE): string {
  let mixed = '#';
  for (let at = 1; at < 7; at += 2) {
    const pure = parseInt(colour.slice(at, at + 2), 16);
    const paper = parseInt(towards.slice(at, at + 2), 16);
    mixed += Math.round(pure * share + paper * (1 - share))
      .toString(16)
      .padStart(2, '0');
  }
  return mixed;
}

/**
 * Gives every piece a palette number such that pieces that meet differ where that is possible:
 * greedy colouring in the order of the parts list, least used colour first. The same input always
 * gives the same colours.
 * @param names the pieces in the order of the parts list
 * @param meetings pairs of names that share a seam
 */
export function assignColours(
  names: readonly string[],
  meetings: readonly (readonly [string, string])[],
): Map<string, number> {
  const neighbours = new Map<string, Set<string>>(names.map((name) => [name, new Set()]));
  for (const [a, b] of meetings) {
    neighbours.get(a)?.add(b);
    neighbours.get(b)?.add(a);
  }
  const used = new Array<number>(okabeIto.length).fill(0);
  const colours = new Map<string, number>();
  for (const name of names) {
    const clashes = new Array<number>(okabeIto.length).fill(0);
    for (const other of neighbours.get(name) ?? []) {
      const colour = colours.get(other);
      if (colour !== undefined) clashes[colour]!++;
    }
    let best = 0;
    for (let colour = 1; colour < okabeIto.length; colour++) {
      const fewerClashes = clashes[colour]! - clashes[best]!;
      if (fewerClashes < 0 || (fewerClashes === 0 && used[colour]! < used[best]!)) best = colour;
    }
    colours.set(name, best);
    used[best]!++;
  }
  return colours;
}
