import { OBJLoader } from 'three/addons/loaders/OBJLoader.js';
import { type BufferGeometry, type Mesh } from 'three';
import { describe, expect, it } from 'vitest';
import { signedVolume, surfaceArea } from '../../shared/geometry/mesh/measure.js';
import { edgeReport } from '../../shared/geometry/mesh/topology.js';
import { objFile, objText } from '../../test/support/obj-files.js';
import { box, sphere, torus } from '../../test/support/shapes.js';
import { JobRefusal } from '../runtime/job-refusal.js';
import { readModel } from './model-reader.js';

const read = (text: string, parts: number[] | null = null) =>
  readModel(new TextEncoder().encode(text), 'prop.obj', { parts });

function refusalOf(text: string): string {
  try {
    read(text);
  } catch (error) {
    if (error instanceof JobRefusal) return error.message;
    throw error;
  }
  throw new Error('The file was not refused.');
}

/** A cube of side 10 with quadrilaterals, in several ways of writing. */
const cubeVertices =
  'v 0 0 0\nv 10 0 0\nv 10 10 0\nv 0 10 0\nv 0 0 10\nv 10 0 10\nv 10 10 10\nv 0 10 10\n';
const cubeFaces = ['4 3 2 1', '5 6 7 8', '1 2 6 5', '2 3 7 6', '3 4 8 7', '4 1 5 8'];
const cube = cubeVertices + cubeFaces.map((face) => `f ${face}\n`).join('');

describe('reading an OBJ file', () => {
  it('gives the mesh that was written, digit for digit', () => {
    for (const { mesh } of [sphere(50, 24, 12), torus(40, 12, 24, 16)]) {
      const reading = readModel(objFile(mesh), 'prop.obj');
      expect(reading).toMatchObject({
        format: 'obj',
        fileUnit: null,
        degenerateDropped: 0,
        parts: [],
      });
      expect(reading.facetsRead).toBe(mesh.indices.length / 3);
      expect(signedVolume(reading.mesh)).toBeCloseTo(signedVolume(mesh), 9);
      expect(edgeReport(reading.mesh).closed).toBe(true);
    }
  });

  it('agrees with three’s OBJLoader on volume and area', () => {
    const text = objText(sphere(30, 20, 10).mesh);
    const theirs = (new OBJLoader().parse(text).children[0] as Mesh).geometry as BufferGeometry;
    const corners = Float64Array.from(theirs.getAttribute('position').array);
    const soup = {
      positions: corners,
      indices: Uint32Array.from(corners, (_, i) => i).slice(0, corners.length / 3),
    };
    const ours = read(text).mesh;
    expect(ours.indices.length).toBe(soup.indices.length);
    expect(signedVolume(ours)).toBeCloseTo(signedVolume(soup), 2);
    expect(surfaceArea(ours)).toBeCloseTo(surfaceArea(soup), 2);
  });

  it.each([
    ['plain', cube],
    [
      'with texture and normal numbers',
      cube.replace(/f (\d) (\d) (\d) (\d)/g, 'f $1/1 $2/2/3 $3//4 $4'),
    ],
    [
      'counted from the end',
      cube.replace(
        /f (.*)/g,
        (_, face: string) =>
          `f ${face
            .split(' ')
            .map((corner) => Number(corner) - 9)
            .join(' ')}`,
      ),
    ],
    [
      'with CRLF, tabs and comments',
      `# made by hand\r\n${cube.replaceAll('\n', ' # side\r\n').replaceAll(' ', '\t')}`,
    ],
    ['with CR only', cube.replaceAll('\n', '\r')],
    ['with a byte order mark', `\ufeff${cube}`],
    ['with lines that go on', cube.replace(/f (\d) (\d)/g, 'f $1 \\\n $2')],
    ['with colours behind the coordinates', cube.replace(/v (.*)/g, 'v $1 0.5 0.25 1')],
    [
      'with faces before their vertices',
      cubeFaces.map((face) => `f ${face}\n`).join('') + cubeVertices,
    ],
    [
      'with materials and smoothing',
      `mtllib a.mtl\nvn 0 0 1\nvt 0 0\n${cube.replace('f ', 'usemtl wood\ns off\nf ')}`,
    ],
    ['with doubled corners', cube.replace('f 4 3 2 1', 'f 4 4 3 2 1 1')],
  ])('reads a cube of quadrilaterals %s', (_, text) => {
    const { mesh, facetsRead } = read(text);
    expect(facetsRead).toBe(12);
    expect(edgeReport(mesh).closed).toBe(true);
    expect(signedVolume(mesh)).toBeCloseTo(1000, 9);
  });

  it('cuts a concave face into triangles that keep its area', () => {
    // An L of 3 unit squares, extruded by 1; area of one L 3.
    const outline = [
      [0, 0],
      [2, 0],
      [2, 1],
      [1, 1],
      [1, 2],
      [0, 2],
    ];
    const vertices = [0, 1].flatMap((z) => outline.map(([x, y]) => `v ${x} ${y} ${z}`));
    const sides = outline.map(
      (_, i) => `f ${i + 1} ${((i + 1) % 6) + 1} ${((i + 1) % 6) + 7} ${i + 7}`,
    );
    const faces = ['f 6 5 4 3 2 1', 'f 7 8 9 10 11 12', ...sides];
    // Also when the faces stand before their vertices.
    for (const lines of [
      [...vertices, ...faces],
      [...faces, ...vertices],
    ]) {
      const { mesh } = read(lines.join('\n'));
      expect(mesh.indices.length / 3).toBe(2 * 4 + 6 * 2);
      expect(edgeReport(mesh).closed).toBe(true);
      expect(signedVolume(mesh)).toBeCloseTo(3, 12);
      expect(surfaceArea(mesh)).toBeCloseTo(2 * 3 + 8, 12);
    }
  });

  it('offers its objects as parts, or its groups, and takes the chosen ones', () => {
    const small = objText(box([0, 0, 0], [1, 1, 1]).mesh, 1);
    const large = objText(box([5, 0, 0], [7, 2, 2]).mesh, 9);
    for (const word of ['o', 'g']) {
      const text = `${word} small one\n${small}${word} large\n${large}`;
      const all = read(text);
      expect(all.parts).toEqual([
        { name: 'small one', facets: 12, isTaken: true },
        { name: 'large', facets: 12, isTaken: true },
      ]);
      expect(signedVolume(all.mesh)).toBeCloseTo(9, 9);
      const one = read(text, [1]);
      expect(one.parts.map((part) => part.isTaken)).toEqual([false, true]);
      expect(one.facetsRead).toBe(12);
      expect(signedVolume(one.mesh)).toBeCloseTo(8, 9);
    }
    expect(() => read(`o a\n${small}o b\n${large}`, [2])).toThrow(
      /has no part 3: it holds 2 parts/,
    );
  });

  it('notes lines and points, which have no surface', () => {
    expect(read(`${cube}l 1 2\np 3\n`).notes).toEqual([
      'The file also holds 2 lines, points or curves. They have no surface and were passed over.',
    ]);
  });

  it.each([
    [
      'v 0 0 0\nv 1 0 0\n',
      /^“prop\.obj” is an OBJ file with 2 vertices but without a single face\.$/,
    ],
    ['o nothing\n', /without a single face/],
    ['v 0 0\nf 1 1 1\n', /a vertex with fewer than three numbers \(line 1\)/],
    ['v 0 0 0,5\n', /“0,5” where a number should stand \(line 1\)/],
    ['v 0 0 nan\n', /not a number or infinite \(line 1\)/],
    ['v 0 0 1e9\n', /beyond ±10 000 000 \(line 1\)/],
    [`${cube}f 1 2 9\n`, /names vertex 9, but holds only 8 \(line 15\)/],
    [`${cube}f 1 2 0\n`, /names the vertex “0”, which there is not \(line 15\)/],
    [`${cube}f 1 2 -9\n`, /names the vertex “-9”, which there is not/],
    [`${cube}f 1 2\n`, /a face of 2 corners \(line 15\)/],
    [`${cube}f 1 x 2\n`, /“x” where a vertex number should stand/],
    [`${cube}rubbish 1 2\n`, /“rubbish” where a statement should stand \(line 15\)/],
  ])('refuses %j with the line', (text, sentence) => {
    expect(refusalOf(text)).toMatch(sentence);
  });
});
