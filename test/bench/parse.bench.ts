import { type BufferGeometry } from 'three';
import { STLLoader } from 'three/addons/loaders/STLLoader.js';
import { mergeVertices } from 'three/addons/utils/BufferGeometryUtils.js';
import { weldTriangles } from '../../shared/geometry/mesh/weld.js';
import { readStl } from '../../workers/intake/stl-reader.js';
import { toSoup } from '../support/shapes.js';
import { atMost, type BenchTable } from './support/bench-table.js';
import { benchKnot } from './support/knot-case.js';
import { median, timeOnce, timeInTurn } from './support/stopwatch.js';

const TURNS = 5;
const RUNS_A_TURN = 2;
const LIMIT = 0.2;

/** Reading and welding a binary STL of 1,000,000 facets. */
export async function bench(): Promise<BenchTable> {
  const bytes = binaryStl(toSoup(benchKnot(2500, 200)));
  const parseTimes: number[] = [];
  const theirParseTimes: number[] = [];
  const [ours, theirs] = await timeInTurn(
    TURNS,
    [
      RUNS_A_TURN,
      () => {
        const parsed = timeOnce(() => readStl(bytes, 'knot.stl'));
        parseTimes.push(parsed.ms);
        return weldTriangles(parsed.result.soup).mesh.positions.length / 3;
      },
    ],
    () => {
      const parsed = timeOnce(() => new STLLoader().parse(bytes.buffer as ArrayBuffer));
      theirParseTimes.push(parsed.ms);
      return mergedVertices(parsed.result);
    },
  );
  const ratio = ours.medianMs / theirs.medianMs;
  const parseMs = median(parseTimes);
  const theirParseMs = median(theirParseTimes);
  return {
    title: 'Reading a binary STL of 1,000,000 facets and welding it',
    columns: ['reader', 'parse ms', 'weld ms', 'both ms', 'of three', 'vertices'],
    rows: [
      ['ours', parseMs, ours.medianMs - parseMs, ours.medianMs, ratio, ours.result],
      [
        'three: STLLoader, mergeVertices',
        theirParseMs,
        theirs.medianMs - theirParseMs,
        theirs.medianMs,
        1,
        theirs.result,
      ],
    ],
    targets: [atMost('ours against three', ratio, LIMIT)],
  };
}

function mergedVertices(geometry: BufferGeometry): number {
  // Facet normals differ at every corner and would keep all vertices apart.
  geometry.deleteAttribute('normal');
  return mergeVertices(geometry).getAttribute('position').count;
}

/** After 3D Systems' StereoLithography Interface Specification, 1989; normals left at zero. */
function binaryStl(soup: Float32Array): Uint8Array {
  const facets = soup.length / 9;
  const bytes = new Uint8Array(84 + 50 * facets);
  const view = new DataView(bytes.buffer);
  view.setUint32(80, facets, true);
  for (let facet = 0; facet < facets; facet++) {
    for (let k = 0; k < 9; k++)
      view.setFloat32(84 + 50 * facet + 12 + 4 * k, soup[9 * facet + k]!, true);
  }
  return bytes;
}
