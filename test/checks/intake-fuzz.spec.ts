import { beforeAll, describe, expect, it } from 'vitest';
import { edgeReport } from '../../shared/geometry/mesh/topology.js';
import { meshReport } from '../../shared/jobs/model-inspect.js';
import { noChoices } from '../../shared/jobs/mending-choices.js';
import { inspectFile } from '../../workers/inspecting/inspect-file.js';
import type { MeshReading } from '../../workers/intake/mesh-reading.js';
import { readModel } from '../../workers/intake/model-reader.js';
import { JobRefusal } from '../../workers/runtime/job-refusal.js';
import { loadSolids, type Solids } from '../../workers/solids/solid-kernel.js';
import { mutateBytes, mutatePackage, mutateText } from '../support/mutate.js';
import { objFile, objText } from '../support/obj-files.js';
import { randomInteger, seededRandom } from '../support/random.js';
import { box, boxWithCavity, sphere, toSoup } from '../support/shapes.js';
import { asciiStl, asciiText, binaryStl, reversedBinaryStl } from '../support/stl-files.js';
import { meshObject, modelXml, simpleThreeMf, threeMfFile } from '../support/threemf-files.js';

const seed = Number(process.env['SW_FUZZ_SEED'] ?? 20_261_201);
const runs = 20_000;
/** Of those that can be read, every so many goes through the whole inspection. */
const inspectedEvery = 60;
const slowestMs = 2_000;
/** Of the whole process, which holds the solid kernel and what the tests before left. */
const mostMemoryBytes = 1.5e9;

const cube = box([0, 0, 0], [20, 20, 20]).mesh;
const ball = sphere(20, 10, 5).mesh;
const hollow = boxWithCavity(20, 10).mesh;
const text = (content: string) => new TextEncoder().encode(content);
const quads =
  'v 0 0 0\nv 9 0 0\nv 9 9 0\nv 0 9 0\nv 0 0 9\nv 9 0 9\nv 9 9 9\nv 0 9 9\no a\nf 4/1 3 2//2 1\nf 5 6 7 8\ng b\nf 1 2 6 5\nf 2 3 7 6\nf -6 -5 -1 -2\nf 4 1 5 8 # side\nl 1 2\n';
const twoItems = modelXml(
  meshObject(1, cube, 'name="Foot"') +
    '<object id="2"><components><component objectid="1" transform="1 0 0 0 1 0 0 0 1 30 0 0"/><component objectid="1"/></components></object>',
  '<item objectid="1"/><item objectid="2" transform="-1 0 0 0 1 0 0 0 1 0 0 0"/>',
  { unit: 'inch' },
);

const formats: [string, Uint8Array[], (bytes: Uint8Array, random: () => number) => Uint8Array][] = [
  [
    'binary STL',
    [
      binaryStl(toSoup(hollow)),
      binaryStl(toSoup(ball), { header: 'solid ball' }),
      reversedBinaryStl(toSoup(cube)),
    ],
    mutateBytes,
  ],
  [
    'ASCII STL',
    [asciiStl(toSoup(cube)), text(asciiText(toSoup(cube)) + asciiText(toSoup(ball).slice(0, 90)))],
    mutateText,
  ],
  ['OBJ', [objFile(hollow), text(quads), text(`# two\no one\n${objText(cube)}`)], mutateText],
  [
    '3MF',
    [simpleThreeMf(cube), threeMfFile(twoItems), simpleThreeMf(hollow, 'micron')],
    mutatePackage,
  ],
];

function expectValid(reading: MeshReading, bytes: Uint8Array): void {
  const { positions, indices } = reading.mesh;
  const vertices = positions.length / 3;
  let isSound = true;
  for (const index of indices) if (!(index < vertices)) isSound = false;
  for (const value of positions) if (!(Math.abs(value) <= 1e7)) isSound = false;
  for (let i = 0; i < indices.length; i += 3)
    if (
      indices[i] === indices[i + 1] ||
      indices[i + 1] === indices[i + 2] ||
      indices[i + 2] === indices[i]
    )
      isSound = false;
  expect(isSound).toBe(true);
  expect(reading.facetsRead).toBe(indices.length / 3 + reading.degenerateDropped);
  // The shortest facet is three words of an OBJ; components of a 3MF may be used again.
  if (reading.format !== '3mf') expect(reading.facetsRead).toBeLessThanOrEqual(bytes.length / 2);
}

function expectSentence(error: unknown): void {
  if (!(error instanceof JobRefusal)) throw error;
  expect(error.message).toMatch(/^“prop” .*\.$/su);
  expect(error.message).not.toMatch(/undefined|\[object|\n|at .*\.ts/);
  expect(error.message.length).toBeLessThan(400);
}

describe('mutated files', () => {
  let solids: Solids;
  beforeAll(async () => {
    solids = await loadSolids();
  });

  it.each(formats)(
    `of %s end as a mesh or a sentence (20 000, seed ${seed})`,
    (format, originals, mutate) => {
      const random = seededRandom(seed);
      let read = 0;
      let slowest = 0;
      for (let run = 0; run < runs; run++) {
        const bytes = mutate(originals[randomInteger(random, originals.length)]!, random);
        const start = performance.now();
        try {
          const reading = readModel(bytes, 'prop');
          expectValid(reading, bytes);
          if (read++ % inspectedEvery === 0) inspectWhole(bytes, solids);
        } catch (error) {
          expectSentence(error);
        }
        slowest = Math.max(slowest, performance.now() - start);
      }
      console.log(
        `${format}: ${read} read, ${runs - read} refused, slowest ${slowest.toFixed(0)} ms`,
      );
      expect(read).toBeGreaterThan(runs / 100);
      expect(read).toBeLessThan(runs);
      expect(slowest).toBeLessThan(slowestMs);
      expect(process.memoryUsage().rss).toBeLessThan(mostMemoryBytes);
    },
    120_000,
  );
});

function inspectWhole(bytes: Uint8Array, solids: Solids): void {
  const choices = { ...noChoices, fillHolesUpTo: 1e8 };
  const { report, solid } = inspectFile({ bytes, fileName: 'prop', choices }, { solids });
  expect(meshReport.parse(report)).toEqual(report);
  if (!solid) return;
  expect(edgeReport(solid).closed).toBe(true);
  expect(report.volume).toBeGreaterThan(0);
}
