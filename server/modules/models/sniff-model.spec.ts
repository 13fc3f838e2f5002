import { describe, expect, it } from 'vitest';
import { sniffModel } from './sniff-model.js';

function binary(facets: number, header = ''): Buffer {
  const bytes = Buffer.alloc(84 + 50 * facets);
  bytes.write(header, 'latin1');
  bytes.writeUInt32LE(facets, 80);
  return bytes;
}
const ask = (bytes: Buffer, name = 'prop.stl') =>
  sniffModel(bytes.subarray(0, 1024), bytes.length, name);

describe('sniffModel', () => {
  it('lets through what may be an STL, however its header reads', () => {
    expect(ask(binary(12))).toBeNull();
    expect(ask(binary(2, 'solid but binary'))).toBeNull();
    expect(ask(binary(2, 'PK\x03\x04 by accident'))).toBeNull();
    expect(ask(Buffer.from('solid x\nfacet normal 0 0 1\n'))).toBeNull();
    expect(ask(Buffer.from('\ufeff  SOLID upper case'))).toBeNull();
    expect(ask(Buffer.from('# remark\nfacet normal 0 0 1'))).toBeNull();
  });

  it('lets through OBJ and 3MF', () => {
    expect(ask(Buffer.from('# made by hand\r\n# twice\nv 0 0 0\n'))).toBeNull();
    expect(ask(Buffer.from('mtllib a.mtl\no heron\n'))).toBeNull();
    expect(ask(Buffer.from('g\nf 1 2 3\n'))).toBeNull();
    expect(ask(Buffer.from(`# ${'long '.repeat(300)}`), 'prop.obj')).toBeNull();
    expect(ask(Buffer.from('PK\x03\x04rest', 'latin1'), 'Prop.3MF')).toBeNull();
    expect(ask(Buffer.from('PK\x03\x04....3D/3dmodel.model', 'latin1'))).toBeNull();
    expect(ask(Buffer.from('vase of glass'))).toContain('begins with');
  });

  it('leaves a truncated binary and a wrong count to the inspection, which can say more', () => {
    const whole = binary(40);
    expect(ask(whole.subarray(0, 1000))).toBeNull();
    whole.writeUInt32LE(1_000_000, 80);
    expect(ask(whole)).toBeNull();
  });

  it.each([
    ['PK\x03\x04rest', 'a ZIP archive. Unpack it'],
    ['\x89PNG\r\n', 'a PNG picture'],
    ['%PDF-1.7', 'a PDF'],
    ['ply\nformat ascii', 'a PLY model'],
    ['Dear maker,', 'begins with “Dear maker,”'],
    ['<html>', 'begins with “<html>”'],
    ['\x00\x01\x02', 'its 3 bytes'],
  ])('refuses %j and says why', (text, reason) => {
    expect(ask(Buffer.from(text, 'latin1'))).toContain(reason);
  });
});
