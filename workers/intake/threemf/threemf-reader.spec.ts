import { strToU8, zipSync } from 'fflate';
import { describe, expect, it } from 'vitest';
import { boundingBox, signedVolume } from '../../../shared/geometry/mesh/measure.js';
import { edgeReport } from '../../../shared/geometry/mesh/topology.js';
import { box, sphere } from '../../../test/support/shapes.js';
import {
  meshObject,
  modelXml,
  relationshipsXml,
  simpleThreeMf,
  threeMfFile,
} from '../../../test/support/threemf-files.js';
import { JobRefusal } from '../../runtime/job-refusal.js';
import { readModel } from '../model-reader.js';

const read = (bytes: Uint8Array, parts: number[] | null = null) =>
  readModel(bytes, 'prop.3mf', { parts });

function refusalOf(bytes: Uint8Array): string {
  try {
    read(bytes);
  } catch (error) {
    if (error instanceof JobRefusal) return error.message;
    throw error;
  }
  throw new Error('The file was not refused.');
}

const cube = box([0, 0, 0], [10, 10, 10]).mesh;
const ball = sphere(20, 24, 12).mesh;
const production = 'xmlns:p="http://schemas.microsoft.com/3dmanufacturing/production/2015/06"';

describe('reading a 3MF file', () => {
  it('gives the mesh that was written', () => {
    const reading = read(simpleThreeMf(ball));
    expect(reading).toMatchObject({ format: '3mf', parts: [], degenerateDropped: 0, notes: [] });
    expect(edgeReport(reading.mesh).closed).toBe(true);
    expect(signedVolume(reading.mesh)).toBeCloseTo(signedVolume(ball), 9);
  });

  it.each([
    ['micron', 0.001],
    ['millimeter', 1],
    ['centimeter', 10],
    ['inch', 25.4],
    ['foot', 304.8],
    ['meter', 1000],
  ])('knows the unit %s (3MF Core 1.4.0, 3.4)', (unit, millimetres) => {
    expect(read(simpleThreeMf(cube, unit)).fileUnit).toEqual({ name: unit, millimetres });
  });

  it('takes millimetres when the file states no unit, and refuses one that there is not', () => {
    expect(read(simpleThreeMf(cube, null)).fileUnit!.millimetres).toBe(1);
    expect(refusalOf(simpleThreeMf(cube, 'furlong'))).toMatch(/the unit “furlong”/);
  });

  it('places items by their transform, a row vector times the matrix', () => {
    // Turned by 90° about z, (x, y) → (-y, x), and moved by (100, 0, 5).
    const turned = '<item objectid="1" transform="0 1 0 -1 0 0 0 0 1 100 0 5"/>';
    const { mesh } = read(
      threeMfFile(modelXml(meshObject(1, box([0, 0, 0], [30, 20, 10]).mesh), turned)),
    );
    expect(boundingBox(mesh.positions)).toMatchObject({ min: [80, 0, 5], max: [100, 30, 15] });
    expect(signedVolume(mesh)).toBeCloseTo(6000, 6);
  });

  it('turns the triangles of a mirrored object, so that outside stays outside', () => {
    const mirrored = '<item objectid="1" transform="-1 0 0 0 1 0 0 0 1 0 0 0"/>';
    expect(
      signedVolume(read(threeMfFile(modelXml(meshObject(1, cube), mirrored))).mesh),
    ).toBeCloseTo(1000, 6);
  });

  it('lays out components within components', () => {
    const pair =
      '<object id="2"><components><component objectid="1"/><component objectid="1" transform="1 0 0 0 1 0 0 0 1 20 0 0"/></components></object>';
    const four =
      '<object id="3"><components><component objectid="2"/><component objectid="2" transform="2 0 0 0 2 0 0 0 2 0 50 0"/></components></object>';
    const { mesh, facetsRead } = read(
      threeMfFile(
        modelXml(
          meshObject(1, cube) + pair + four,
          '<item objectid="3" transform="1 0 0 0 1 0 0 0 1 0 0 7"/>',
        ),
      ),
    );
    expect(facetsRead).toBe(4 * 12);
    expect(signedVolume(mesh)).toBeCloseTo(2 * 1000 + 2 * 8000, 6);
    expect(boundingBox(mesh.positions)).toMatchObject({ min: [0, 0, 7], max: [60, 70, 27] });
  });

  it('offers items as parts and takes the chosen ones', () => {
    const model = modelXml(
      meshObject(1, cube, 'name="Foot"') + meshObject(2, ball),
      '<item objectid="1"/><item objectid="2" partnumber="B-7" transform="1 0 0 0 1 0 0 0 1 100 0 0"/><item objectid="1" transform="1 0 0 0 1 0 0 0 1 0 100 0"/>',
    );
    const all = read(threeMfFile(model));
    expect(all.parts.map((part) => [part.name, part.facets, part.isTaken])).toEqual([
      ['Foot', 12, true],
      ['B-7', ball.indices.length / 3, true],
      ['Foot', 12, true],
    ]);
    const one = read(threeMfFile(model), [0, 2]);
    expect(one.facetsRead).toBe(24);
    expect(one.parts.map((part) => part.isTaken)).toEqual([true, false, true]);
  });

  it('passes over objects that are not part of the model, and says so', () => {
    const support = meshObject(2, ball).replace('type="model"', 'type="support"');
    const reading = read(
      threeMfFile(
        modelXml(meshObject(1, cube) + support, '<item objectid="1"/><item objectid="2"/>'),
      ),
    );
    expect(reading.facetsRead).toBe(12);
    expect(reading.notes[0]).toMatch(/^1 object of the file is marked as support/);
  });

  it('follows paths to other model parts (production extension)', () => {
    const model = modelXml('', '<item objectid="9" p:path="/3D/more/ball.model"/>', {
      attributes: `${production} requiredextensions="p"`,
    });
    const reading = read(
      threeMfFile(model, { '3D/more/ball.model': modelXml(meshObject(9, ball), '') }),
    );
    expect(signedVolume(reading.mesh)).toBeCloseTo(signedVolume(ball), 6);
  });

  it('finds the model part by its relationship, wherever it lies', () => {
    const bytes = zipSync({
      '_rels/.rels': strToU8(relationshipsXml('/stage/props.model')),
      'stage/props.model': strToU8(modelXml(meshObject(1, cube), '<item objectid="1"/>')),
    });
    expect(read(bytes).facetsRead).toBe(12);
  });
});

describe('3MF files that are refused', () => {
  const withModel = (xml: string) => threeMfFile(xml);
  const item = '<item objectid="1"/>';

  it.each<[string, () => Uint8Array, RegExp]>([
    [
      'an archive of something else',
      () => zipSync({ 'a.stl': strToU8('solid') }),
      /ZIP archive, but not a 3MF file\. Unpack it/,
    ],
    [
      'a cut archive',
      () => simpleThreeMf(ball).slice(0, 1500),
      /cut off while being saved or sent/,
    ],
    [
      'XML that is cut',
      () => withModel(modelXml(meshObject(1, cube), item).slice(0, 400)),
      /not well formed/,
    ],
    [
      'nothing in the build',
      () => withModel(modelXml(meshObject(1, cube), '')),
      /nothing in its build/,
    ],
    [
      'no triangle',
      () => withModel(modelXml('<object id="1"><mesh/></object>', item)),
      /without a single triangle/,
    ],
    [
      'an object that is not there',
      () => withModel(modelXml(meshObject(1, cube), '<item objectid="4"/>')),
      /uses an object \(4\)/,
    ],
    [
      'a vertex that is not there',
      () => withModel(modelXml(meshObject(1, cube).replace('v1="0"', 'v1="77"'), item)),
      /names vertex 77 of 8/,
    ],
    [
      'a number that is none',
      () => withModel(modelXml(meshObject(1, cube).replace('x="0"', 'x="0,5"'), item)),
      /whose x is no number/,
    ],
    [
      'a transform of eleven numbers',
      () =>
        withModel(
          modelXml(meshObject(1, cube), '<item objectid="1" transform="1 0 0 0 1 0 0 0 1 0 0"/>'),
        ),
      /a transform that is not 12 finite numbers/,
    ],
    [
      'an unknown extension',
      () =>
        withModel(
          modelXml(meshObject(1, cube), item, {
            attributes: 'xmlns:q="http://example.org/lattice" requiredextensions="q"',
          }),
        ),
      /needs the 3MF extension “q”/,
    ],
    [
      'components in a ring',
      () =>
        withModel(
          modelXml(
            '<object id="1"><components><component objectid="1"/></components></object>',
            item,
          ),
        ),
      /contain themselves/,
    ],
    [
      'a document type',
      () =>
        withModel(
          modelXml(meshObject(1, cube), item).replace(
            '<model',
            '<!DOCTYPE m [<!ENTITY a "b">]><model',
          ),
        ),
      /document type/,
    ],
    [
      'XML nested without end',
      () => withModel(modelXml('<a>'.repeat(5000), item)),
      /nests its XML too deeply/,
    ],
    [
      'text that is not UTF-8',
      () =>
        zipSync({
          '_rels/.rels': strToU8(relationshipsXml()),
          '3D/3dmodel.model': Uint8Array.of(...strToU8('<model>'), 0xff, 0xfe),
        }),
      /not UTF-8/,
    ],
  ])('%s', (_, bytes, sentence) => {
    expect(refusalOf(bytes())).toMatch(sentence);
    expect(refusalOf(bytes())).toMatch(/^“prop\.3mf” .*\.$/);
  });

  it('archives that unpack to far more than they hold', () => {
    const zeros = new Uint8Array(60 * 1024 * 1024);
    const bomb = zipSync({ '_rels/.rels': strToU8(relationshipsXml()), '3D/3dmodel.model': zeros });
    expect(bomb.length).toBeLessThan(100 * 1024);
    expect(refusalOf(bomb)).toMatch(/unpacks to far more/);
  });

  it('archives of very many entries', () => {
    const many = Object.fromEntries(
      Array.from({ length: 10_001 }, (_, i) => [`${i}.model`, new Uint8Array(0)]),
    );
    expect(refusalOf(zipSync(many))).toMatch(/more than 10 000 entries/);
  });

  it('components that multiply without end', () => {
    // 2^30 cubes in 30 objects.
    const doubled = Array.from(
      { length: 30 },
      (_, i) =>
        `<object id="${i + 2}"><components><component objectid="${i + 1}"/><component objectid="${i + 1}"/></components></object>`,
    );
    const bytes = withModel(
      modelXml(meshObject(1, cube) + doubled.join(''), '<item objectid="31"/>'),
    );
    expect(refusalOf(bytes)).toMatch(/multiplies its components/);
  });
});
