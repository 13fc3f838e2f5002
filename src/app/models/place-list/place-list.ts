import { ChangeDetectionStrategy, Component, computed, input, output, signal } from '@angular/core';
import { MatButton } from '@angular/material/button';
import { MatIcon } from '@angular/material/icon';
import { type ProblemPlace } from '../../../../shared/jobs/model-inspect.js';

const shownAtFirst = 10;

/** Places worth a look; each flies the picture there. */
@Component({
  selector: 'sw-place-list',
  imports: [MatButton, MatIcon],
  template: `
    <ol>
      @for (place of shown(); track $index) {
        <li>
          <button matButton type="button" (click)="placeChosen.emit(place)">
            <mat-icon aria-hidden="true">my_location</mat-icon>
            {{ place.sentence }}
          </button>
        </li>
      }
    </ol>
    @if (hidden() > 0) {
      <button matButton type="button" (click)="showsAll.set(true)">Show {{ hidden() }} more</button>
    }
  `,
  styles: `
    :host {
      display: block;
      min-width: 0;
    }

    ol {
      padding-inline-start: 28px;
      font-variant-numeric: tabular-nums;
    }

    li button {
      height: auto;
      min-height: 36px;
      text-align: start;
      white-space: normal;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class PlaceList {
  readonly places = input.required<readonly ProblemPlace[]>();
  readonly placeChosen = output<ProblemPlace>();

  protected readonly showsAll = signal(false);
  protected readonly shown = computed(() =>
    this.showsAll() ? this.places() : this.places().slice(0, shownAtFirst),
  );
  protected readonly hidden = computed(() => this.places().length - this.shown().length);
}
