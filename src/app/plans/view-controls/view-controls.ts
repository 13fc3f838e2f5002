import { ChangeDetectionStrategy, Component, computed, input, output } from '@angular/core';
import { MatButton, MatIconButton } from '@angular/material/button';
import { MatButtonToggle, MatButtonToggleGroup } from '@angular/material/button-toggle';
import { MatIcon } from '@angular/material/icon';
import { MatSlider, MatSliderThumb } from '@angular/material/slider';
import { type PlanView } from '../plan-store';

const views: readonly { view: PlanView; name: string }[] = [
  { view: 'assembled', name: 'Assembled' },
  { view: 'spread', name: 'Spread' },
  { view: 'bed', name: 'On the bed' },
];

/** How the picture is shown: view, spread, which piece, fit. */
@Component({
  selector: 'sw-view-controls',
  imports: [
    MatButton,
    MatButtonToggle,
    MatButtonToggleGroup,
    MatIcon,
    MatIconButton,
    MatSlider,
    MatSliderThumb,
  ],
  templateUrl: './view-controls.html',
  styleUrl: './view-controls.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ViewControls {
  readonly view = input.required<PlanView>();
  readonly spread = input.required<number>();
  /** Name of the selected piece. */
  readonly selected = input<string | null>(null);
  /** One piece cannot be spread. */
  readonly pieceCount = input.required<number>();
  readonly viewChosen = output<PlanView>();
  readonly spreadChosen = output<number>();
  readonly stepped = output<number>();
  readonly fitAsked = output<void>();

  protected readonly views = computed(() =>
    views.filter(({ view }) => view !== 'spread' || this.pieceCount() > 1),
  );
  protected readonly spreadPercent = computed(() => Math.round(this.spread() * 100));
  protected readonly inPercent = (value: number): string => `${value} %`;
}
