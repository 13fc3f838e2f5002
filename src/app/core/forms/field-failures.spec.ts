import { FormControl, FormGroup } from '@angular/forms';
import { ApiFailure } from '../http/api-failure';
import { placeFieldFailures } from './field-failures';

const refusal = (...details: { path: string; message: string }[]) =>
  new ApiFailure('request.invalid', 'Some fields are wrong.', 400, details);

describe('placeFieldFailures', () => {
  it('puts a remark on its field until the field is changed', () => {
    const form = new FormGroup({ heightMm: new FormControl(0) });
    const rest = placeFieldFailures(form, refusal({ path: 'heightMm', message: 'Too low' }));
    expect(rest).toBe('');
    expect(form.controls.heightMm.errors).toEqual({ server: 'Too low' });
    expect(form.controls.heightMm.touched).toBe(true);
    form.controls.heightMm.setValue(5);
    expect(form.valid).toBe(true);
  });

  it('returns what belongs to no field or to one that is not asked for', () => {
    const form = new FormGroup({ depthMm: new FormControl({ value: 1, disabled: true }) });
    const rest = placeFieldFailures(
      form,
      refusal({ path: 'depthMm', message: 'Too deep' }, { path: 'other', message: 'Odd' }),
    );
    expect(rest).toBe('Too deep. Odd');
  });

  it('returns the sentence of a refusal without details', () => {
    expect(placeFieldFailures(new FormGroup({}), refusal())).toBe('Some fields are wrong.');
  });
});
