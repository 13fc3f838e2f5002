import { describe, expect, it } from 'vitest';
import { cleanFileName, modelNameOf } from './file-name.js';

describe('cleanFileName', () => {
  it.each([
    ['heron.stl', 'heron.stl'],
    ['../../etc/passwd', 'passwd'],
    ['C:\\parts\\bell.stl', 'bell.stl'],
    ['/absolute/é ⌀.stl', 'é ⌀.stl'],
    ['a\u0000b\n\r\tc\u007f.stl', 'abc.stl'],
    ['evil\u202Elts.exe', 'evillts.exe'],
    ['  wide   gap .stl ', 'wide gap .stl'],
    ['..', 'model.stl'],
    ['', 'model.stl'],
    ['folder/', 'model.stl'],
    ['\u0001\u0002', 'model.stl'],
  ])('turns %j into %j', (given, expected) => {
    expect(cleanFileName(given)).toBe(expected);
  });

  it('shortens 300 characters to 200 and keeps the ending', () => {
    const name = cleanFileName(`${'x'.repeat(296)}.stl`);
    expect([...name]).toHaveLength(200);
    expect(name).toMatch(/^x+…\.stl$/);
  });

  it('never cuts a character in half', () => {
    const name = cleanFileName(`${'🔔'.repeat(300)}.stl`);
    expect([...name]).toHaveLength(200);
    // Throws on half a surrogate pair.
    expect(() => encodeURIComponent(name)).not.toThrow();
  });
});

describe('modelNameOf', () => {
  it('leaves the ending away and stays within what the contract allows', () => {
    expect(modelNameOf('harbour bell.v2.stl')).toBe('harbour bell.v2');
    expect(modelNameOf('.stl')).toBe('.stl');
    expect([...modelNameOf(`${'x'.repeat(190)}.stl`)]).toHaveLength(120);
  });
});
