import { type CapFeature } from '../../shared/geometry/features/cap-feature.js';

/** A face with its features as SVG, seen from outside, 4 pixels a mm, up is up. */
export function seamDrawing(
  title: string,
  region: readonly Float64Array[],
  features: readonly CapFeature[],
  caption: readonly string[],
): string {
  const xs = region.flatMap((loop) => [...loop].filter((_, i) => i % 2 === 0));
  const ys = region.flatMap((loop) => [...loop].filter((_, i) => i % 2 === 1));
  const [left, right] = [Math.min(...xs) - 5, Math.max(...xs) + 5];
  const [low, high] = [Math.min(...ys) - 5, Math.max(...ys) + 5];
  const text = 5 * (caption.length + 1);
  const width = Math.max(right - left, 130);
  const path = (loops: readonly Float64Array[]) =>
    loops
      .map((loop) => {
        const points = Array.from(
          { length: loop.length / 2 },
          (_, k) => `${(loop[2 * k]! - left).toFixed(3)} ${(high - loop[2 * k + 1]!).toFixed(3)}`,
        );
        return `M${points.join('L')}Z`;
      })
      .join('');
  const shapes = features.flatMap(({ levels }) =>
    levels.map(
      ({ loops, depthMm }, k) =>
        `<path d="${path(loops)}" fill="${depthMm < 0 ? '#C8D8EA' : k > 0 ? '#1F3A5F' : '#A65E2E'}" fill-rule="evenodd" stroke="#14181D" stroke-width="0.1"/>`,
    ),
  );
  const lines = [title, ...caption].map(
    (line, k) =>
      `<text x="2" y="${(high - low + 5 * (k + 1)).toFixed(1)}" font-size="3.5">${line.replaceAll('&', '&amp;').replaceAll('<', '&lt;')}</text>`,
  );
  const height = high - low + text;
  return `<svg xmlns="http://www.w3.org/2000/svg" width="${(4 * width).toFixed(0)}" height="${(4 * height).toFixed(0)}" viewBox="0 0 ${width.toFixed(2)} ${height.toFixed(2)}" font-family="Roboto, sans-serif"><rect width="100%" height="100%" fill="#F7F5F0"/><path d="${path(region)}" fill="#E9E2D3" fill-rule="evenodd" stroke="#14181D" stroke-width="0.25"/>${shapes.join('')}${lines.join('')}</svg>\n`;
}
