import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import { type PlanPart } from '../../../../shared/jobs/joint-plan.js';
import {
  type AssemblyStep,
  type PlanTotals,
  type Seam,
} from '../../../../shared/jobs/plan-make.js';
import { Notice } from '../../ui/notice/notice';
import { writeDirection, writeMass, writeRange } from '../joint-words';

/** From here on two people should lift (common practice, no source), g. */
const HEAVY_G = 10_000;

/** What is needed beside the pieces, and the order in which they are joined. */
@Component({
  selector: 'sw-glue-up',
  imports: [Notice],
  template: `
    @if (total(); as rows) {
      <dl>
        @for (row of rows; track row.name) {
          <div>
            <dt>{{ row.name }}</dt>
            <dd>{{ row.value }}</dd>
          </div>
        }
      </dl>
    }
    @if (parts().length > 0) {
      <h3>Pins, rods and lips</h3>
      <ul class="parts">
        @for (part of partRows(); track part) {
          <li>{{ part }}</li>
        }
      </ul>
    }
    @if (steps().length > 0) {
      <h3>Order</h3>
      <sw-notice kind="caution">
        Uncured epoxy sensitises the skin: wear gloves, work where air moves, and follow the
        product’s own safety data sheet and your local rules. Nothing here certifies strength: what
        carries a person or hangs over one needs a qualified engineer.
      </sw-notice>
      <ol>
        @for (step of stepRows(); track $index) {
          <li>
            {{ step.move }}
            <span class="sw-quiet">{{ step.glue }}</span>
            @if (step.isHeavy) {
              <span class="heavy">Heavy: two people.</span>
            }
          </li>
        }
      </ol>
    }
  `,
  styles: `
    :host {
      display: grid;
      gap: 12px;
    }
    dl {
      display: grid;
      grid-template-columns: repeat(auto-fill, minmax(170px, 1fr));
      gap: 8px 24px;
      margin: 0;
      font-variant-numeric: tabular-nums;
    }
    dt {
      color: var(--mat-sys-on-surface-variant);
      font: var(--mat-sys-label-medium);
    }
    dd {
      margin: 0;
    }
    ul,
    ol {
      display: grid;
      gap: 6px;
      margin: 0;
      padding-inline-start: 28px;
      font-variant-numeric: tabular-nums;
    }
    .parts {
      columns: 2 18rem;
      display: block;
    }
    li span {
      display: block;
    }
    .heavy {
      font-weight: 500;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class GlueUp {
  readonly steps = input.required<readonly AssemblyStep[]>();
  readonly parts = input.required<readonly PlanPart[]>();
  readonly seams = input.required<readonly Seam[]>();
  readonly totals = input<PlanTotals | null>(null);

  protected readonly total = computed(() => {
    const totals = this.totals();
    if (!totals) return null;
    const { estimate, glueMl, mixes, assembledG } = totals;
    return [
      { name: 'Printed, with support', value: writeMass(estimate.massG) },
      { name: 'Filament', value: writeRange(estimate.filamentM, 'm') },
      { name: 'Printing on one machine', value: writeRange(estimate.hours, 'hours') },
      { name: 'Material', value: writeRange(estimate.cost, 'in your currency') },
      { name: 'Glue to mix', value: writeRange(glueMl, 'ml') },
      { name: 'Mixes of glue', value: String(mixes) },
      { name: 'Object when assembled', value: writeMass(assembledG) },
    ];
  });

  protected readonly partRows = computed(() =>
    this.parts().map(({ name, kind, count, diameterMm, lengthMm, file }) => {
      const size =
        kind === 'lip'
          ? `${lengthMm} mm along the wall, ${diameterMm} mm thick`
          : `Ø ${diameterMm} × ${lengthMm} mm`;
      const from = file === null ? 'cut from stock' : 'in the ZIP, print lying as it is';
      return `${count} × ${name}: ${size}, ${from}`;
    }),
  );

  protected readonly stepRows = computed(() =>
    this.steps().map((step) => ({
      move:
        `${listed(step.moved)} onto ${listed(step.onto)}, moving ${writeDirection(step.direction)}` +
        ` (${step.seams.length === 1 ? 'one seam' : `${step.seams.length} seams`})`,
      glue:
        `${writeRange(step.glueMl, 'ml')} of glue` +
        (step.mixes > 1 ? `, in ${step.mixes} mixes: one pot life is too short for all of it` : ''),
      isHeavy: step.movedMassG[1] > HEAVY_G,
    })),
  );
}

function listed(names: readonly string[]): string {
  if (names.length > 4) return `${names.slice(0, 3).join(', ')} and ${names.length - 3} more`;
  return names.length < 2
    ? (names[0] ?? '')
    : `${names.slice(0, -1).join(', ')} and ${names[names.length - 1]}`;
}
