/** Three figures, without needless zeros or exponents where avoidable. */
export function shortNumber(value: number): string {
  return String(Number(value.toPrecision(3)));
}
