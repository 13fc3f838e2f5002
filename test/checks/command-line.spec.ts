import { spawn } from 'node:child_process';
import { mkdir, mkdtemp, readdir, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { writeStl } from '../../workers/export/stl-writer.js';
import { box } from '../support/shapes.js';

/** The command as a process: what scripts and people get from it. */

const program = fileURLToPath(new URL('../../workers/bin/seamwright.mjs', import.meta.url));
let folder = '';

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'seamwright-command-'));
  const { positions, indices } = box([0, 0, 0], [300, 40, 30]).mesh;
  const bar = writeStl({ positions: Float32Array.from(positions), indices }, 'bar');
  const isBottom = (facet: number) =>
    [0, 1, 2].every((k) => positions[3 * indices[3 * facet + k] + 2] === 0);
  const withoutBottom = indices.filter((_, i) => !isBottom(Math.floor(i / 3)));
  const open = writeStl(
    { positions: Float32Array.from(positions), indices: withoutBottom },
    'open',
  );
  const notANumber = bar.slice();
  new DataView(notANumber.buffer).setFloat32(100, NaN, true);
  await writeFile(join(folder, 'bar.stl'), bar);
  await writeFile(join(folder, 'open.stl'), open);
  await writeFile(join(folder, 'short.stl'), bar.subarray(0, 300));
  await writeFile(join(folder, 'nan.stl'), notANumber);
  await writeFile(join(folder, 'empty.stl'), '');
  await writeFile(join(folder, 'page.stl'), '<!doctype html><title>Not found</title>'.repeat(9));
  await mkdir(join(folder, 'folder.stl'));
  await mkdir(join(folder, 'occupied'));
  await writeFile(join(folder, 'occupied', 'notes.txt'), 'mine');
});
afterAll(() => rm(folder, { recursive: true, force: true }));

function run(...words: string[]): Promise<{ code: number | null; out: string; err: string }> {
  return new Promise((resolve, reject) => {
    const child = spawn(process.execPath, [program, ...words], { cwd: folder });
    let out = '';
    let err = '';
    child.stdout.on('data', (chunk: Buffer) => (out += chunk.toString()));
    child.stderr.on('data', (chunk: Buffer) => (err += chunk.toString()));
    child.on('error', reject);
    child.on('close', (code) => resolve({ code, out, err }));
  });
}

describe('the command line', () => {
  it('prints one JSON object with the agreed names, and leaves nothing behind without --out', async () => {
    const before = await readdir(folder);
    const { code, out, err } = await run('plan', 'bar.stl', '--envelope', '220x220x250', '--json');
    expect({ code, err }).toEqual({ code: 0, err: '' });
    const report = JSON.parse(out);
    const names = (value: object) => Object.keys(value);
    expect(names(report)).toEqual([
      'model',
      'pieces',
      'seams',
      'bounds',
      'proof',
      'timingsMs',
      'peakMemoryMb',
      'plans',
      'mending',
    ]);
    expect(report.model).toEqual({
      triangles: 12,
      volumeMm3: 360_000,
      sizeMm: [300, 40, 30],
      closed: true,
    });
    for (const piece of report.pieces)
      expect(names(piece)).toEqual(['name', 'triangles', 'volumeMm3', 'sizeMm', 'fits', 'file']);
    expect(report.pieces.map((piece: { file: string }) => piece.file)).toEqual(
      report.pieces.map((piece: { name: string }) => `${piece.name}.stl`),
    );
    for (const seam of report.seams) expect(names(seam)).toEqual(['between', 'areaMm2']);
    expect(names(report.bounds)).toEqual(['pieces']);
    for (const row of report.proof)
      expect(names(row)).toEqual(['check', 'measured', 'limit', 'passed']);
    expect(names(report.timingsMs)).toEqual(['parse', 'weld', 'inspect', 'plan', 'cut', 'write']);
    expect(Object.values(report.timingsMs).every((ms) => Number(ms) >= 0)).toBe(true);
    expect(report.peakMemoryMb).toBeGreaterThan(20);
    expect(report.peakMemoryMb).toBeLessThan(4000);
    expect(await readdir(folder)).toEqual(before);
  });

  it('writes the files and a table, and scales by the unit', async () => {
    const words = ['plan', 'bar.stl', '--envelope=round:300x250', '--unit=0.5', '--out', 'made'];
    const { code, out, err } = await run(...words);
    expect({ code, err }).toEqual({ code: 0, err: '' });
    expect(out).toContain('150.0 × 20.0 × 15.0 mm');
    expect(out).toMatch(/P01 +150.00 × 20.00 × 15.00 +45.00 +12 +yes/);
    expect((await readdir(join(folder, 'made'), { recursive: true })).sort()).toEqual([
      'cut-list.csv',
      'manifest.json',
      'pieces',
      'pieces/P01.stl',
    ]);
  });

  it('carries every plan that was found with objectives, bounds and reasons, and takes wishes', async () => {
    const wishes = {
      preferences: { fewPieces: 0.4, littleSupport: 1, hiddenSeams: 0.2, sturdySeams: 0.2 },
      lockedCuts: [{ normal: [1, 0, 0], offset: 140.25 }],
      keepWhole: [{ shape: 'sphere', name: 'boss', centre: [60, 20, 15], radiusMm: 12 }],
    };
    await writeFile(join(folder, 'wishes.json'), JSON.stringify(wishes));
    const words = ['plan', 'bar.stl', '--envelope', '90x90x90+100x100x100', '--json'];
    const { code, out, err } = await run(...words, '--wishes', 'wishes.json');
    expect({ code, err }).toEqual({ code: 0, err: '' });
    const { plans, pieces, bounds, proof } = JSON.parse(out);
    expect(plans.length).toBeGreaterThan(0);
    expect(plans.filter((plan: { isMade: boolean }) => plan.isMade)).toHaveLength(1);
    for (const plan of plans) {
      expect(Object.keys(plan).slice(0, 5)).toEqual([
        'bestAt',
        'isMade',
        'objectives',
        'bounds',
        'cuts',
      ]);
      expect(plan.objectives.pieces).toBeGreaterThanOrEqual(plan.bounds.pieces);
      expect(plan.bounds.gap).toMatch(/fewer/);
      expect(plan.cuts[0]).toMatchObject({ normal: [1, 0, 0], offset: 140.25, locked: true });
      for (const cut of plan.cuts) expect(cut.reason).toMatch(/^[A-Z].*\d.*\.$/);
    }
    const made = plans.find((plan: { isMade: boolean }) => plan.isMade);
    expect(made.bounds.gridPieces).toBeGreaterThanOrEqual(3);
    expect(made.bounds.pieces).toBe(bounds.pieces);
    expect(made.pieces.map((piece: { name: string }) => piece.name)).toEqual(
      pieces.map((piece: { name: string }) => piece.name),
    );
    expect(made.pieces.every((piece: { envelope: number }) => piece.envelope <= 1)).toBe(true);
    const zones = proof.find((row: { check: string }) => row.check.startsWith('Keep-whole'));
    expect(zones).toMatchObject({ passed: true });
  });

  it.each([
    ['nowhere.json', null, /“nowhere.json” cannot be read \(ENOENT\)/],
    ['broken.json', '{', /“broken.json” are not JSON/],
    [
      'odd.json',
      '{"preferences":{"fewPieces":7}}',
      /“odd.json” cannot be used: preferences\.fewPieces/,
    ],
    [
      'cross.json',
      '{"lockedCuts":[{"normal":[1,0,0],"offset":150}],"keepWhole":[{"shape":"sphere","name":"boss","centre":[150,20,15],"radiusMm":9}]}',
      /cut 1 crosses the keep-whole zone “boss”/,
    ],
  ])('refuses the wishes %s in one sentence', async (name, text, sentence) => {
    if (text !== null) await writeFile(join(folder, name), text);
    const words = ['plan', 'bar.stl', '--envelope', '90x90x90', '--wishes', name];
    const { code, out, err } = await run(...words);
    expect({ code, out }).toEqual({ code: 2, out: '' });
    expect(err).toMatch(sentence);
    expect(err.trim().split('\n')).toHaveLength(1);
  });

  it('takes a broken file once it is told how, and lists what was done', async () => {
    const { code, out } = await run(
      ...['plan', 'open.stl', '--envelope', '220x220x250', '--fill-holes=all', '--json'],
    );
    expect(code).toBe(0);
    const report = JSON.parse(out);
    expect(report.model).toMatchObject({ volumeMm3: 360_000, closed: true });
    expect(report.mending).toMatchObject([{ kind: 'fill-holes', count: 1 }]);
  });

  it('explains itself', async () => {
    const { code, out } = await run('--help');
    expect(code).toBe(0);
    expect(out).toContain('round:300x400');
  });

  const size = ['--envelope', '220x220x250'];
  it.each([
    ['a missing file', ['nowhere.stl', ...size], /“nowhere.stl” does not exist/],
    ['a folder', ['folder.stl', ...size], /“folder.stl” is a folder/],
    ['an empty file', ['empty.stl', ...size], /“empty.stl” is empty/],
    ['a web page', ['page.stl', ...size], /“page.stl” is a web page/],
    ['a truncated file', ['short.stl', ...size], /“short.stl”/],
    ['a coordinate that is no number', ['nan.stl', ...size], /“nan.stl”/],
    [
      'an open surface',
      ['open.stl', ...size],
      /“open.stl” .*has a hole with a rim of up to [\d.]+ mm: give --fill-holes/,
    ],
    ['an envelope of 0', ['bar.stl', '--envelope', '0x220x250'], /“bar.stl”: .*width of 0 mm/],
    ['a negative envelope', ['bar.stl', '--envelope', '220x220x-1'], /height of -1 mm/],
    ['an envelope over 10 m', ['bar.stl', '--envelope', '220x220x10000.5'], /10000.5 mm/],
    ['a margin without room', ['bar.stl', ...size, '--margin', '110'], /leaves no room/],
    ['too many pieces', ['bar.stl', '--envelope', '2x2x2'], /“bar.stl”.*pieces/],
    ['an occupied folder', ['bar.stl', ...size, '--out', 'occupied'], /holds other files/],
    ['a folder below a file', ['bar.stl', ...size, '--out', 'nan.stl/x'], /lies below a file/],
    ['an unknown option', ['bar.stl', ...size, '--quick'], /“--quick” is not known/],
  ] as [string, string[], RegExp][])(
    'answers %s with exit code 2 and one sentence, and writes nothing',
    async (_, words, expected) => {
      const before = (await readdir(folder, { recursive: true })).sort();
      const { code, out, err } = await run('plan', ...words);
      expect(err).toMatch(expected);
      expect({ code, out }).toEqual({ code: 2, out: '' });
      expect(err).toMatch(/^[^\n]+[.)]\n$/);
      expect(err).not.toMatch(/\n\s+at |[.!?] [A-Z]/);
      expect((await readdir(folder, { recursive: true })).sort()).toEqual(before);
    },
  );
});
