import { maxModelBytes } from '../../../shared/api/models.contract.js';
import { checkBeforeSending } from './upload-checks';

describe('checkBeforeSending', () => {
  it.each(['bell.stl', 'BELL.STL', 'a.b.stl', 'bell.obj', 'Bell.3MF'])('lets %s pass', (name) => {
    expect(checkBeforeSending({ name, size: maxModelBytes })).toBeNull();
  });

  it.each(['bell.step', 'bell.stl.zip', 'stl', ''])('says that %j is no model', (name) => {
    expect(checkBeforeSending({ name, size: 100 })).toContain('.stl');
  });

  it('says that a file is empty or too large, with the numbers', () => {
    expect(checkBeforeSending({ name: 'a.stl', size: 0 })).toContain('empty');
    const size = maxModelBytes + 1;
    expect(checkBeforeSending({ name: 'a.stl', size })).toContain('512.0\u00a0MB');
  });
});
