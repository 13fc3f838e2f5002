import { ChangeDetectionStrategy, Component, computed, input, output, signal } from '@angular/core';
import { MatButton } from '@angular/material/button';
import { MatFormField, MatHint, MatLabel } from '@angular/material/form-field';
import { MatOption } from '@angular/material/core';
import { MatSelect } from '@angular/material/select';
import {
  jointChoice,
  jointKinds,
  type JointChoice,
  type JointKind,
  type JointWishes,
  pinDiametersMm,
} from '../../../../shared/jobs/joint-plan.js';
import { type Seam } from '../../../../shared/jobs/plan-make.js';
import { jointNames } from '../joint-words';

const ALL = 'all';
const AUTO = 'auto';

/** Chooses another joint for one seam or for all, and asks for the plan to be made with it. */
@Component({
  selector: 'sw-joint-form',
  imports: [MatButton, MatFormField, MatHint, MatLabel, MatOption, MatSelect],
  template: `
    <div class="fields">
      <mat-form-field>
        <mat-label>Seam</mat-label>
        <mat-select [value]="seam()" (valueChange)="seam.set($event)">
          <mat-option [value]="all">All seams</mat-option>
          @for (one of seamNames(); track $index; let index = $index) {
            <mat-option [value]="index">{{ one }}</mat-option>
          }
        </mat-select>
      </mat-form-field>
      <mat-form-field>
        <mat-label>Joint</mat-label>
        <mat-select [value]="kind()" (valueChange)="kind.set($event)">
          <mat-option [value]="auto">As the walls allow</mat-option>
          @for (one of kinds; track one.kind) {
            <mat-option [value]="one.kind">{{ one.name }}</mat-option>
          }
        </mat-select>
      </mat-form-field>
      <mat-form-field>
        <mat-label>Diameter</mat-label>
        <mat-select [value]="diameterMm()" (valueChange)="diameterMm.set($event)">
          <mat-option [value]="auto">As the walls allow</mat-option>
          @for (one of diameters; track one) {
            <mat-option [value]="one">{{ one }} mm</mat-option>
          }
        </mat-select>
        <mat-hint>Sizes that rods are sold in</mat-hint>
      </mat-form-field>
    </div>
    <button matButton="outlined" type="button" [disabled]="isMaking()" (click)="ask()">
      Make the plan with this joint
    </button>
  `,
  styles: `
    :host {
      display: grid;
      gap: 12px;
      justify-items: start;
      margin-top: 16px;
    }
    .fields {
      display: flex;
      flex-wrap: wrap;
      gap: 12px;
    }
    mat-form-field {
      width: min(260px, 100%);
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class JointForm {
  readonly seams = input.required<readonly Seam[]>();
  /** As the plan was made. */
  readonly joints = input.required<JointWishes>();
  readonly isMaking = input(false);
  readonly asked = output<JointWishes>();

  protected readonly all = ALL;
  protected readonly auto = AUTO;
  protected readonly kinds = jointKinds.map((kind) => ({ kind, name: jointNames[kind] }));
  protected readonly diameters = pinDiametersMm;
  protected readonly seam = signal<number | typeof ALL>(ALL);
  protected readonly kind = signal<JointKind | typeof AUTO>(AUTO);
  protected readonly diameterMm = signal<NonNullable<JointChoice['diameterMm']> | typeof AUTO>(
    AUTO,
  );
  protected readonly seamNames = computed(() =>
    this.seams().map(({ between }) => between.join(' and ')),
  );

  protected ask(): void {
    const choice = jointChoice.parse({
      kind: givenOrNull(this.kind()),
      diameterMm: givenOrNull(this.diameterMm()),
    });
    const joints = this.joints();
    const seam = this.seam();
    if (seam === ALL) {
      this.asked.emit({ ...joints, usual: choice, seams: [] });
      return;
    }
    const { between, cut } = this.seams()[seam]!;
    const others = joints.seams.filter(
      (one) => one.cut !== cut || one.between.join() !== between.join(),
    );
    this.asked.emit({ ...joints, seams: [...others, { between, cut, choice }] });
  }
}

function givenOrNull<T>(value: T | typeof AUTO): T | null {
  return value === AUTO ? null : value;
}
