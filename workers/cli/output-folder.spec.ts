import { mkdir, mkdtemp, readdir, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { MANIFEST_KIND } from '../export/manifest.js';
import { openOutputFolder, openTemporaryFolder, type PieceFolder } from './output-folder.js';

const scratch = mkdtemp(join(tmpdir(), 'seamwright-spec-'));
afterAll(async () => rm(await scratch, { recursive: true, force: true }));

const bytes = (text: string) => new TextEncoder().encode(text);
const writeResult = async ({ files }: PieceFolder, mark: string) => {
  await files.write('pieces/P01.stl', bytes(mark));
  await files.write('cut-list.csv', bytes(mark));
  await files.write('manifest.json', bytes(JSON.stringify({ kind: MANIFEST_KIND, mark })));
};
const tree = async (folder: string) => (await readdir(folder, { recursive: true })).sort();
const WHOLE = ['cut-list.csv', 'manifest.json', 'pieces', 'pieces/P01.stl'];

describe('openOutputFolder', () => {
  it('makes the folder and its parents, and shows the result only when it is kept', async () => {
    const folder = join(await scratch, 'deep', 'result');
    const output = await openOutputFolder(folder);
    await writeResult(output, 'one');
    expect(await readdir(folder)).not.toContain('manifest.json');
    await output.keep();
    await output.discard();
    expect(await tree(folder)).toEqual(WHOLE);
  });

  it('removes everything it made when the result is not kept', async () => {
    const parent = join(await scratch, 'given-up');
    const output = await openOutputFolder(join(parent, 'result'));
    await writeResult(output, 'one');
    await output.discard();
    await expect(readdir(parent)).rejects.toThrow(/ENOENT/);
  });

  it('replaces an earlier result as a whole, and clears what a killed run left', async () => {
    const folder = join(await scratch, 'again');
    const first = await openOutputFolder(folder);
    await writeResult(first, 'one');
    await first.files.write('pieces/P02.stl', bytes('one'));
    await first.keep();
    await first.discard();
    await mkdir(join(folder, '.seamwright-left-behind'));
    const second = await openOutputFolder(folder);
    await writeResult(second, 'two');
    await second.keep();
    await second.discard();
    expect(await tree(folder)).toEqual(WHOLE);
    expect(await readFile(join(folder, 'pieces/P01.stl'), 'utf8')).toBe('two');
  });

  it('keeps the earlier result when the new one is incomplete', async () => {
    const folder = join(await scratch, 'incomplete');
    const first = await openOutputFolder(folder);
    await writeResult(first, 'one');
    await first.keep();
    await first.discard();
    const second = await openOutputFolder(folder);
    await second.files.write('pieces/P01.stl', bytes('two'));
    await expect(second.keep()).rejects.toThrow();
    await second.discard();
    expect(await tree(folder)).toEqual(WHOLE);
    expect(await readFile(join(folder, 'pieces/P01.stl'), 'utf8')).toBe('one');
  });

  it.each([
    ['a stranger’s file', 'notes.txt', 'mine'],
    ['a manifest of something else', 'manifest.json', '{"kind":"recipes"}'],
    ['a manifest that is no JSON', 'manifest.json', 'mine'],
  ])('leaves a folder alone that holds %s', async (title, name, content) => {
    const folder = join(await scratch, `foreign ${title}`);
    await mkdir(folder);
    await writeFile(join(folder, name), content);
    await expect(openOutputFolder(folder)).rejects.toThrow(/holds other files/);
    expect(await tree(folder)).toEqual([name]);
    expect(await readFile(join(folder, name), 'utf8')).toBe(content);
  });

  it('refuses a file in place of a folder', async () => {
    const file = join(await scratch, 'a-file');
    await writeFile(file, 'mine');
    await expect(openOutputFolder(file)).rejects.toThrow(/is not a folder/);
  });
});

describe('openTemporaryFolder', () => {
  it('gives back what was written and leaves nothing', async () => {
    const folder = await openTemporaryFolder();
    await folder.files.write('pieces/P01.stl', bytes('piece'));
    expect(new TextDecoder().decode(await folder.files.read('pieces/P01.stl'))).toBe('piece');
    await folder.keep();
    await folder.discard();
    await expect(folder.files.read('pieces/P01.stl')).rejects.toThrow(/ENOENT/);
  });
});
