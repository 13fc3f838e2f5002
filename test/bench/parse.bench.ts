import { type BufferGeometry } from 'three';
import { STLLoader } from 'three/addons/loaders/STLLoader.js';
import { mergeVertices } from 'three/addons/utils/BufferGeometryUtils.js';
import { readModel } from '../../workers/intake/model-reader.js';
import { toSoup } from '../support/shapes.js';
import { atMost, type BenchTable } from './support/bench-table.js';
import { benchKnot } from './support/knot-case.js';
import { median, timeOnce, timeInTurn } from './support/stopwatch.js';

const TURNS = 5;
const RUNS_A_TURN = 2;
/** Eight times as fast at 500,000 facets. */
const LIMIT = 1 / 8;

/** Reading and welding binary STLs of 500,000 and 1,000,000 facets. */
export async function bench(): Promise<BenchTable> {
  const small = await compare(1250);
  const large = await compare(2500);
  return {
    title: 'Reading a binary STL and welding it',
    columns: ['reader', 'facets', 'parse ms', 'weld ms', 'both ms', 'of three', 'vertices'],
    rows: [...small.rows, ...large.rows],
    targets: [atMost('ours against three, 500,000 facets', small.ratio, LIMIT)],
  };
}

async function compare(along: number) {
  const bytes = binaryStl(toSoup(benchKnot(along, 200)));
  const facets = (bytes.length - 84) / 50;
  const parseTimes: number[] = [];
  const theirParseTimes: number[] = [];
  const [ours, theirs] = await timeInTurn(
    TURNS,
    [
      RUNS_A_TURN,
      () => {
        const { mesh, timingsMs } = readModel(bytes, 'knot.stl');
        parseTimes.push(timingsMs.parse);
        return mesh.positions.length / 3;
      },
    ],
    () => {
      const parsed = timeOnce(() => new STLLoader().parse(bytes.buffer as ArrayBuffer));
      theirParseTimes.push(parsed.ms);
      return mergedVertices(parsed.result);
    },
  );
  const ratio = ours.medianMs / theirs.medianMs;
  const row = (name: string, parseMs: number, bothMs: number, of: number, vertices: number) => [
    ...[name, facets, parseMs, bothMs - parseMs, bothMs, of, vertices],
  ];
  return {
    ratio,
    rows: [
      row('ours', median(parseTimes), ours.medianMs, ratio, ours.result),
      row('three', median(theirParseTimes), theirs.medianMs, 1, theirs.result),
    ],
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
