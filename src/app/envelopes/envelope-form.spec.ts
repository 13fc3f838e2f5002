import { TestBed } from '@angular/core/testing';
import { envelopeRequest } from '../../../shared/api/envelopes.contract.js';
import { buildEnvelopeForm, envelopeRequestFrom, fillEnvelopeForm } from './envelope-form';
import { makeRectangular, makeRound } from './testing/envelope-fixtures';

const build = () => TestBed.runInInjectionContext(() => buildEnvelopeForm());

describe('the envelope form', () => {
  it('starts valid but for the name, and makes a request that the contract takes', () => {
    const form = build();
    expect(form.valid).toBe(false);
    form.controls.name.setValue(' Bench ');
    expect(form.valid).toBe(true);
    const request = envelopeRequestFrom(form);
    expect(envelopeRequest.parse(request)).toEqual(request);
    expect(request.name).toBe('Bench');
  });

  it.each([makeRectangular(), makeRound()])(
    'returns a stored $shape envelope unchanged',
    (kept) => {
      const form = build();
      fillEnvelopeForm(form, kept);
      const { id, updatedAt, ...fields } = kept;
      expect([id.length, typeof updatedAt]).toEqual([20, 'string']);
      expect(envelopeRequestFrom(form)).toEqual(fields);
      expect(form.valid).toBe(true);
    },
  );

  it('asks only for the lengths of the chosen shape', () => {
    const form = build();
    form.patchValue({ name: 'Bench', widthMm: null });
    expect(form.valid).toBe(false);
    form.controls.shape.setValue('round');
    expect(form.valid).toBe(true);
    form.controls.diameterMm.setValue(null);
    expect(form.valid).toBe(false);
    form.controls.shape.setValue('rectangular');
    form.controls.widthMm.setValue(100);
    expect(form.valid).toBe(true);
  });

  it.each([
    { heightMm: 0 },
    { heightMm: 10_001 },
    { widthMm: -1 },
    { marginMm: -1 },
    { marginMm: 110 },
    { nozzleMm: 0 },
    { nozzleMm: 6 },
    { layerHeightMm: 0.5 },
    { name: ' ' },
    { name: 'x'.repeat(81) },
  ])('refuses exactly what the contract refuses: %j', (change) => {
    const form = build();
    form.patchValue({ name: 'Bench', ...change });
    expect(form.valid).toBe(false);
    expect(envelopeRequest.safeParse(envelopeRequestFrom(form)).success).toBe(false);
  });
});
