import { assignColours, okabeIto, tintOf } from './palette';
import { bodyTint, pieceTint } from './scene-theme';

describe('assignColours', () => {
  it('gives pieces that meet different colours', () => {
    const names = ['P01', 'P02', 'P03', 'P04'];
    const meetings = [
      ['P01', 'P02'],
      ['P02', 'P03'],
      ['P01', 'P03'],
      ['P03', 'P04'],
    ] as const;
    const colours = assignColours(names, meetings);
    for (const [a, b] of meetings) expect(colours.get(a)).not.toBe(colours.get(b));
  });

  it('uses every colour once before any colour twice', () => {
    const names = Array.from({ length: okabeIto.length }, (_, at) => `P${at}`);
    expect(new Set(assignColours(names, []).values()).size).toBe(okabeIto.length);
  });

  it('gives every piece a colour even when it meets more pieces than there are colours', () => {
    const names = Array.from({ length: 12 }, (_, at) => `P${at}`);
    const meetings = names.flatMap((a, at) => names.slice(0, at).map((b) => [a, b] as const));
    const colours = assignColours(names, meetings);
    expect(names.every((name) => colours.get(name)! in okabeIto)).toBe(true);
  });

  it('ignores meetings with pieces that are not there', () => {
    expect(assignColours(['P01'], [['P01', 'P99']]).size).toBe(1);
  });
});

describe('tintOf', () => {
  it('is the pure colour at share 1 and the ground at share 0', () => {
    expect(tintOf('#56B4E9', '#ffffff', 1)).toBe('#56b4e9');
    expect(tintOf('#56B4E9', '#ffffff', 0)).toBe('#ffffff');
  });

  it('stays a colour of six digits for dark parts', () => {
    expect(tintOf('#000305', '#000000', 0.5)).toMatch(/^#[0-9a-f]{6}$/);
  });
});

describe('pieceTint', () => {
  // WCAG 2.2, 1.4.11: graphics need 3:1 against what is next to them; edges carry the shapes.
  const luminance = (colour: string) =>
    [1, 3, 5]
      .map((at) => parseInt(colour.slice(at, at + 2), 16) / 255)
      .map((part) => (part <= 0.04045 ? part / 12.92 : ((part + 0.055) / 1.055) ** 2.4))
      .reduce((sum, part, at) => sum + part * [0.2126, 0.7152, 0.0722][at]!, 0);
  const contrast = (a: string, b: string) => {
    const [low, high] = [luminance(a), luminance(b)].sort((x, y) => x - y);
    return (high! + 0.05) / (low! + 0.05);
  };

  it.each([
    ['light', false, '#24282d'],
    ['dark', true, '#0b0e11'],
  ])('keeps every tint 3:1 apart from the edges drawn on it (%s)', (_name, isDark, edges) => {
    const tints = okabeIto.map((_colour, at) => pieceTint(at, isDark));
    for (const tint of [...tints, bodyTint(isDark)])
      expect(contrast(tint, edges)).toBeGreaterThan(3);
  });
});
