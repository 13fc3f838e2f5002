/** STL files made by code, sound or damaged on purpose. A soup is nine coordinates a facet. */

export interface BinaryOptions {
  readonly header?: string;
  /** What the count says; default is the truth. */
  readonly count?: number;
  readonly trailing?: Uint8Array;
}

export function binaryStl(soup: ArrayLike<number>, options: BinaryOptions = {}): Uint8Array {
  const facets = soup.length / 9;
  const { header = 'made by a test', count = facets, trailing = new Uint8Array(0) } = options;
  const bytes = new Uint8Array(84 + 50 * facets + trailing.length);
  bytes.set(new TextEncoder().encode(header).subarray(0, 80));
  const view = new DataView(bytes.buffer);
  view.setUint32(80, count, true);
  for (let facet = 0; facet < facets; facet++)
    for (let k = 0; k < 9; k++)
      view.setFloat32(84 + 50 * facet + 12 + 4 * k, soup[9 * facet + k]!, true);
  bytes.set(trailing, 84 + 50 * facets);
  return bytes;
}

/** The same file as a big-endian machine writes it. */
export function reversedBinaryStl(soup: ArrayLike<number>): Uint8Array {
  const bytes = binaryStl(soup);
  const facets = soup.length / 9;
  bytes.subarray(80, 84).reverse();
  for (let facet = 0; facet < facets; facet++)
    for (let k = 0; k < 12; k++) {
      const at = 84 + 50 * facet + 4 * k;
      bytes.subarray(at, at + 4).reverse();
    }
  return bytes;
}

/** ASCII STL with enough digits that every float32 comes back as it was. */
export function asciiText(soup: ArrayLike<number>, name = 'test'): string {
  const lines = [`solid ${name}`];
  for (let at = 0; at < soup.length; at += 9) {
    lines.push('  facet normal 0 0 0', '    outer loop');
    for (let k = 0; k < 9; k += 3) {
      const corner = [0, 1, 2].map((axis) => soup[at + k + axis]!.toExponential(8));
      lines.push(`      vertex ${corner.join(' ')}`);
    }
    lines.push('    endloop', '  endfacet');
  }
  lines.push(`endsolid ${name}`, '');
  return lines.join('\n');
}

export function asciiStl(soup: ArrayLike<number>, name?: string): Uint8Array {
  return new TextEncoder().encode(asciiText(soup, name));
}
