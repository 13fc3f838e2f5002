import { inject } from '@angular/core';
import { takeUntilDestroyed } from '@angular/core/rxjs-interop';
import { NonNullableFormBuilder } from '@angular/forms';
import {
  type EnvelopeRequest,
  type EnvelopeResponse,
} from '../../../shared/api/envelopes.contract.js';
import { layerBelowNozzle, marginLeavesBed, nameWithin, numberWithin } from './envelope-validators';

export type EnvelopeShape = EnvelopeRequest['shape'];
export type EnvelopeForm = ReturnType<typeof buildEnvelopeForm>;

/** An empty field is null. The numbers to start from are common desktop sizes. */
const millimetres = (start: number): number | null => start;

/** The typed form of one envelope; call it where injection works. */
export function buildEnvelopeForm() {
  const fields = inject(NonNullableFormBuilder);
  const length = numberWithin({ least: 0, most: 10_000 });
  const fine = numberWithin({ least: 0, most: 5 });
  const form = fields.group(
    {
      name: ['', nameWithin(80)],
      shape: fields.control<EnvelopeShape>('rectangular'),
      widthMm: [millimetres(220), length],
      depthMm: [millimetres(220), length],
      diameterMm: [millimetres(200), length],
      heightMm: [millimetres(250), length],
      marginMm: [millimetres(2), numberWithin({ least: 0, most: 1_000, orEqual: true })],
      nozzleMm: [millimetres(0.4), fine],
      layerHeightMm: [millimetres(0.2), fine],
    },
    { validators: [marginLeavesBed, layerBelowNozzle] },
  );
  const { shape, widthMm, depthMm, diameterMm } = form.controls;
  const askOnlyForShape = (chosen: EnvelopeShape) => {
    for (const control of [widthMm, depthMm]) {
      if (chosen === 'round') control.disable();
      else control.enable();
    }
    if (chosen === 'round') diameterMm.enable();
    else diameterMm.disable();
  };
  askOnlyForShape(shape.value);
  shape.valueChanges.pipe(takeUntilDestroyed()).subscribe(askOnlyForShape);
  return form;
}

/** Shows a stored envelope in the form. */
export function fillEnvelopeForm(form: EnvelopeForm, envelope: EnvelopeResponse): void {
  form.patchValue(envelope);
  form.markAsPristine();
}

/** The request for what the form holds. Call it on a valid form only: empty numbers become 0. */
export function envelopeRequestFrom(form: EnvelopeForm): EnvelopeRequest {
  const { name, shape, widthMm, depthMm, diameterMm, ...rest } = form.getRawValue();
  const common = {
    name: name.trim(),
    heightMm: rest.heightMm ?? 0,
    marginMm: rest.marginMm ?? 0,
    nozzleMm: rest.nozzleMm ?? 0,
    layerHeightMm: rest.layerHeightMm ?? 0,
  };
  return shape === 'round'
    ? { ...common, shape, diameterMm: diameterMm ?? 0 }
    : { ...common, shape, widthMm: widthMm ?? 0, depthMm: depthMm ?? 0 };
}
