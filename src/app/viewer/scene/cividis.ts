/**
 * Sixteen stops of the colour map cividis (J. Nuñez, C. Anderton, R. Renslow, PLoS ONE 13(7),
 * e0199239, 2018), which reads alike with and without colour vision, dark to light. Values from memory,
 * rounded to 1/255.
 */
const stops: readonly (readonly [number, number, number])[] = [
  [0, 34, 78],
  [0, 47, 107],
  [24, 58, 112],
  [47, 70, 109],
  [65, 82, 108],
  [80, 93, 109],
  [94, 105, 112],
  [108, 117, 116],
  [123, 129, 120],
  [139, 141, 119],
  [156, 154, 115],
  [174, 167, 108],
  [193, 181, 98],
  [212, 195, 84],
  [233, 210, 64],
  [254, 232, 56],
];

/** The colour at a share of the scale, sRGB from 0 to 1; shares beyond it take its ends. */
export function cividisAt(share: number): readonly [number, number, number] {
  const at = Math.min(1, Math.max(0, share)) * (stops.length - 1);
  const low = Math.min(Math.floor(at), stops.length - 2);
  const part = at - low;
  const mix = (channel: 0 | 1 | 2) =>
    (stops[low]![channel] * (1 - part) + stops[low + 1]![channel] * part) / 255;
  return [mix(0), mix(1), mix(2)];
}

/** The scale as a CSS gradient from left to right. */
export const cividisGradient = `linear-gradient(to right, ${stops
  .map(([r, g, b]) => `rgb(${r} ${g} ${b})`)
  .join(', ')})`;
