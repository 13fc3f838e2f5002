// Reads a binary STL of six million facets and prints what it needed beside the file, bytes a facet.
import { readModel } from '../../../workers/intake/model-reader.js';

const along = 12_000;
const around = 250;
const facets = 2 * along * around;
const bytes = new Uint8Array(84 + 50 * facets);
const words = new DataView(bytes.buffer);
words.setUint32(80, facets, true);
/** A torus, facet by facet: nothing of it is held but the file. */
const point = (i: number, j: number): [number, number, number] => {
  const u = (2 * Math.PI * (i % along)) / along;
  const v = (2 * Math.PI * (j % around)) / around;
  const r = 400 + 100 * Math.cos(v);
  return [r * Math.cos(u), r * Math.sin(u), 100 * Math.sin(v)];
};
let at = 84;
const facet = (...corners: [number, number][]) => {
  at += 12;
  for (const [i, j] of corners)
    for (const value of point(i, j)) {
      words.setFloat32(at, value, true);
      at += 4;
    }
  at += 2;
};
for (let i = 0; i < along; i++)
  for (let j = 0; j < around; j++) {
    facet([i, j], [i + 1, j], [i + 1, j + 1]);
    facet([i, j], [i + 1, j + 1], [i, j + 1]);
  }

globalThis.gc?.();
const before = process.memoryUsage();
let most = 0;
const look = () => {
  most = Math.max(most, process.memoryUsage().arrayBuffers);
};
const start = performance.now();
const { mesh } = readModel(bytes, 'torus.stl', { onProgress: look });
look();
const ms = performance.now() - start;
process.stdout.write(
  JSON.stringify({
    facets,
    vertices: mesh.positions.length / 3,
    bytesAFacet: (most - before.arrayBuffers) / facets,
    ms,
  }),
);
