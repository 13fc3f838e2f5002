import { spawn } from 'node:child_process';
import { mkdirSync, mkdtempSync, readFileSync, rmSync, utimesSync, writeFileSync } from 'node:fs';
import { createServer } from 'node:net';
import { tmpdir } from 'node:os';
import { dirname, join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { buildParts, type RunTool, staleParts } from './build.mjs';
import { freePort, whyPortIsUnusable } from './ports.mjs';
import { claimDataFolder } from './run-record.mjs';
import { readSettings } from './settings.mjs';

const folders: string[] = [];
function newFolder(): string {
  const folder = mkdtempSync(join(tmpdir(), 'sw-starter-'));
  folders.push(folder);
  return folder;
}
afterAll(() => folders.forEach((folder) => rmSync(folder, { recursive: true, force: true })));

function sleeper() {
  return spawn(process.execPath, ['-e', 'setInterval(() => {}, 1000)'], { stdio: 'ignore' });
}
const end = (child: ReturnType<typeof sleeper>) =>
  new Promise((resolve) => {
    child.once('exit', resolve);
    child.kill('SIGKILL');
  });

describe('the settings', () => {
  it('have defaults, and wrong ones are named in a sentence', () => {
    expect(readSettings({})).toMatchObject({ port: 4310, host: '127.0.0.1', databaseUrl: null });
    for (const PORT of ['0', '70000', 'abc', '1.5'])
      expect(() => readSettings({ PORT })).toThrow(/PORT must be a whole number/);
  });
});

describe('a port', () => {
  it('that is free may be used; one that is taken is refused with another to choose', async () => {
    const port = await freePort();
    expect(await whyPortIsUnusable(port, '127.0.0.1')).toBeNull();
    const other = createServer().listen(port, '127.0.0.1');
    await new Promise((resolve) => other.once('listening', resolve));
    const sentence = await whyPortIsUnusable(port, '127.0.0.1');
    expect(sentence).toMatch(/is taken by another program.*PORT=\d+ npm start/);
    expect(sentence).not.toContain(`PORT=${port} `);
    other.close();
  });

  it('of an address that is not ours is refused', async () => {
    expect(await whyPortIsUnusable(4310, '203.0.113.1')).toMatch(/has no address 203\.0\.113\.1/);
  });
});

describe('the data folder', () => {
  it('is held by one start at a time', async () => {
    const data = newFolder();
    const claim = await claimDataFolder(data, 'http://127.0.0.1:4310');
    await expect(claimDataFolder(data, 'http://127.0.0.1:4320')).rejects.toThrow(
      /runs already on .* at http:\/\/127\.0\.0\.1:4310/,
    );
    claim.letGo();
    (await claimDataFolder(data, 'x')).letGo();
  });

  it('is taken over from a start that was killed, and what that left running is ended', async () => {
    const data = newFolder();
    const [killed, left] = [sleeper(), sleeper()];
    const claim = await claimDataFolder(data, 'x');
    claim.note(left);
    const file = join(data, 'run.json');
    const record = JSON.parse(readFileSync(file, 'utf8')) as object;
    writeFileSync(file, JSON.stringify({ ...record, pid: killed.pid, ticks: 1 }));
    await end(killed);
    const exited = new Promise((resolve) => left.once('exit', (_code, signal) => resolve(signal)));
    (await claimDataFolder(data, 'x')).letGo();
    expect(await exited).toBe('SIGTERM');
  });

  it('never ends a stranger that has got the number of a child of ours', async () => {
    const data = newFolder();
    const stranger = sleeper();
    const children = [{ pid: stranger.pid, ticks: 1 }];
    writeFileSync(join(data, 'run.json'), JSON.stringify({ pid: 999_999, ticks: 1, children }));
    (await claimDataFolder(data, 'x')).letGo();
    expect(stranger.exitCode ?? stranger.signalCode).toBeNull();
    await end(stranger);
  });

  it('with a half-written record can be taken', async () => {
    const data = newFolder();
    writeFileSync(join(data, 'run.json'), '{"pid": 12');
    (await claimDataFolder(data, 'x')).letGo();
  });
});

describe('the build', () => {
  function newProject(): string {
    const root = newFolder();
    for (const file of [
      'package-lock.json',
      'tsconfig.json',
      'angular.json',
      'shared/a.ts',
      'src/main.ts',
      'server/main.ts',
      'server/main.spec.ts',
      'workers/worker-main.ts',
    ])
      put(root, file, file);
    return root;
  }
  function put(root: string, file: string, text: string): void {
    mkdirSync(dirname(join(root, file)), { recursive: true });
    writeFileSync(join(root, file), text);
  }
  const names = (root: string) => staleParts(root).map((part) => part.name);
  const builder =
    (root: string): RunTool =>
    (_command, args) => {
      const isClient = args.includes('build');
      const results = isClient
        ? ['dist/web/browser/index.html']
        : ['dist/server/main.js', 'dist/workers/worker-main.js'];
      results.forEach((file) => put(root, file, 'built'));
      return Promise.resolve({ status: 0, said: '' });
    };

  it('is done once, and again for the part whose sources changed', async () => {
    const root = newProject();
    expect(names(root)).toEqual(['client', 'server']);
    await buildParts(builder(root), root, staleParts(root));
    expect(names(root)).toEqual([]);
    put(root, 'src/main.ts', 'longer than before');
    expect(names(root)).toEqual(['client']);
    await buildParts(builder(root), root, staleParts(root));
    put(root, 'workers/new.ts', 'new');
    expect(names(root)).toEqual(['server']);
    await buildParts(builder(root), root, staleParts(root));
    utimesSync(join(root, 'shared/a.ts'), new Date(0), new Date(0));
    expect(names(root)).toEqual(['client', 'server']);
    await buildParts(builder(root), root, staleParts(root));
    put(root, 'server/main.spec.ts', 'a test is not built');
    expect(names(root)).toEqual([]);
    rmSync(join(root, 'dist/server/main.js'));
    expect(names(root)).toEqual(['server']);
  });

  it('that fails says what the tool said and is tried again', async () => {
    const root = newProject();
    const failing: RunTool = () => Promise.resolve({ status: 1, said: 'TS1005: no' });
    await expect(buildParts(failing, root, staleParts(root))).rejects.toThrow(
      /could not be built:\nTS1005/,
    );
    expect(names(root)).toEqual(['client', 'server']);
  });
});
