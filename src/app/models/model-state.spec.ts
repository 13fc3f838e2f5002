import { isInspecting, modelState } from './model-state';
import { makeJob, makeModel, makeReport } from './testing/model-fixtures';

describe('modelState', () => {
  it.each([
    ['queued', makeJob({ state: 'queued', fraction: 0 }), 'inspecting', 'Waiting for inspection'],
    ['running', makeJob({ state: 'running', fraction: 0.427 }), 'inspecting', 'Inspecting, 42 %'],
    ['cancelled', makeJob({ state: 'cancelled' }), 'cancelled', 'Inspection cancelled'],
    [
      'refused',
      makeJob({ state: 'failed', error: { code: 'refused', message: '' } }),
      'refused',
      'File refused',
    ],
    [
      'abandoned',
      makeJob({ state: 'failed', error: { code: 'abandoned', message: '' } }),
      'failed',
      'Inspection failed',
    ],
  ] as const)('puts a job that is %s into words', (_title, job, kind, words) => {
    expect(modelState(makeModel({}, { job, report: null }))).toMatchObject({ kind, words });
  });

  it('goes by the report once there is one', () => {
    expect(modelState(makeModel()).kind).toBe('ready');
    const report = makeReport({ plannable: false, refusal: 'Open.' });
    expect(modelState(makeModel({}, { report })).kind).toBe('refused');
    const asks = [{ kind: 'remesh', sentence: 'Rebuild it.' } as const];
    const asking = makeModel({}, { report: makeReport({ plannable: false, asks }) });
    expect(modelState(asking)).toMatchObject({ kind: 'asking', words: 'Needs a decision' });
    expect(isInspecting(makeModel())).toBe(false);
  });
});
