import { type FormGroup } from '@angular/forms';
import { type ApiFailure, type FieldFailure } from '../http/api-failure';

/**
 * Puts the server's remarks on the fields they are about, as the error `server`, which lasts until
 * the field is changed. Returns what belongs to no field, as sentences for the page.
 */
export function placeFieldFailures(form: FormGroup, failure: ApiFailure): string {
  const homeless: FieldFailure[] = [];
  for (const detail of failure.details) {
    const control = form.get(detail.path);
    if (!control || control.disabled) {
      homeless.push(detail);
      continue;
    }
    control.setErrors({ ...control.errors, server: detail.message });
    control.markAsTouched();
  }
  if (failure.details.length === 0) return failure.message;
  return homeless.map((detail) => detail.message).join('. ');
}
