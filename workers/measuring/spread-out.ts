/**
 * Picks points that lie at least a distance apart, in the order given. @param points flat xyz
 * @returns their numbers, at most `most`
 */
export function spreadOut(points: Float64Array, apart: number, most: number): number[] {
  const picked: number[] = [];
  for (let i = 0; i < points.length / 3 && picked.length < most; i++) {
    const isNear = picked.some((other) => {
      const x = points[3 * i] - points[3 * other];
      const y = points[3 * i + 1] - points[3 * other + 1];
      const z = points[3 * i + 2] - points[3 * other + 2];
      return x * x + y * y + z * z < apart * apart;
    });
    if (!isNear) picked.push(i);
  }
  return picked;
}
