import {
  ChangeDetectionStrategy,
  Component,
  computed,
  input,
  linkedSignal,
  output,
} from '@angular/core';
import { MatButton } from '@angular/material/button';
import { MatRadioButton, MatRadioGroup } from '@angular/material/radio';
import { type Piece, type PieceOrientation } from '../../../../shared/jobs/plan-make.js';
import { type OrientationWish } from '../../../../shared/jobs/recipe.js';
import { writeArea, writeLengthMm, writeVolume } from '../../ui/format/quantities';
import { writeDirection, writeMass, writeRange } from '../joint-words';

/** Above this, height of the centre of mass over its room to the edge of the foot, a piece shakes. */
const SHAKY = 4;

/** What one piece takes to print, how it lies, and how else it could lie. */
@Component({
  selector: 'sw-piece-sheet',
  imports: [MatButton, MatRadioButton, MatRadioGroup],
  template: `
    <dl>
      @for (fact of facts(); track fact.name) {
        <div>
          <dt>{{ fact.name }}</dt>
          <dd>{{ fact.value }}</dd>
        </div>
      }
    </dl>
    @for (note of piece().notes; track $index) {
      <p class="sw-quiet">{{ note }}</p>
    }
    @if (piece().openings > 0 && mayMake() && !hasSkins()) {
      <p>
        {{ piece().openings === 1 ? 'One opening' : piece().openings + ' openings' }} in a thin wall
        could be closed by a wall one line wide that you cut out after printing; nothing above it
        then needs support.
      </p>
      <button matButton="outlined" type="button" [disabled]="isMaking()" (click)="skinned.emit()">
        Make the plan with such skins in {{ piece().name }}
      </button>
    }
    @if (piece().orientations.length > 0) {
      <h3 id="lies-heading">How it lies</h3>
      <mat-radio-group
        aria-labelledby="lies-heading"
        [value]="chosen()"
        (change)="chosen.set($event.value)"
      >
        @for (row of ways(); track $index; let index = $index) {
          <mat-radio-button [value]="index" [disabled]="!mayMake()">
            {{ row }}
          </mat-radio-button>
        }
      </mat-radio-group>
      @if (mayMake() && chosen() > 0) {
        <button matButton="outlined" type="button" [disabled]="isMaking()" (click)="ask()">
          Make the plan with {{ piece().name }} lying so
        </button>
      }
    }
  `,
  styles: `
    :host {
      display: grid;
      gap: 12px;
      justify-items: start;
    }
    dl {
      display: grid;
      grid-template-columns: repeat(auto-fill, minmax(150px, 1fr));
      gap: 8px 24px;
      width: 100%;
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
    mat-radio-group {
      display: grid;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class PieceSheet {
  readonly piece = input.required<Piece>();
  readonly mayMake = input(false);
  readonly isMaking = input(false);
  readonly asked = output<OrientationWish>();
  /** Whether its openings are closed already. */
  readonly hasSkins = input(false);
  readonly skinned = output<void>();

  protected readonly chosen = linkedSignal<Piece, number>({
    source: this.piece,
    computation: () => 0,
  });
  protected readonly facts = computed(() => {
    const { estimate, supportMm3 } = this.piece();
    if (!estimate) return [];
    return [
      { name: 'Mass with support', value: writeMass(estimate.massG) },
      { name: 'Filament', value: writeRange(estimate.filamentM, 'm') },
      { name: 'Printing', value: writeRange(estimate.hours, 'hours') },
      { name: 'Material', value: `${writeRange(estimate.cost, 'in your currency')}` },
      { name: 'Support', value: writeVolume(supportMm3) },
    ];
  });
  protected readonly ways = computed(() =>
    this.piece().orientations.map((one, k) => `${k === 0 ? 'As planned: ' : ''}${inWords(one)}`),
  );

  protected ask(): void {
    const { name, orientations } = this.piece();
    const { down } = orientations[this.chosen()]!;
    this.asked.emit({ piece: name, down });
  }
}

function inWords(one: PieceOrientation): string {
  const foot = one.contactMm2 > 0 ? `foot ${writeArea(one.contactMm2)}` : 'no flat foot';
  const stands =
    one.tipping === null
      ? 'needs holding'
      : one.tipping > SHAKY
        ? 'stands shakily'
        : 'stands firmly';
  return (
    `side that looks ${writeDirection(one.down)} on the bed: support ${writeVolume(one.supportMm3)}, ` +
    `${foot}, ${writeLengthMm(one.heightMm)} high, ${stands}, ` +
    `support marks on ${writeArea(one.scarMm2)}`
  );
}
