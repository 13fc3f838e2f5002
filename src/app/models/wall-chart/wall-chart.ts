import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import { type WallReport } from '../../../../shared/jobs/model-inspect.js';
import { writeCount, writeLengthMm } from '../../ui/format/quantities';

const width = 320;
const height = 72;

/** How thick the walls are: the numbers, and how often each thickness was measured. */
@Component({
  selector: 'sw-wall-chart',
  template: `
    <dl class="sw-numbers">
      @for (fact of facts(); track fact.name) {
        <div>
          <dt>{{ fact.name }}</dt>
          <dd>{{ fact.value }}</dd>
        </div>
      }
    </dl>
    <figure>
      <svg [attr.viewBox]="viewBox" role="img" [attr.aria-label]="description()">
        @for (bar of bars(); track $index) {
          <rect
            [attr.x]="bar.x"
            [attr.y]="bar.y"
            [attr.width]="bar.width"
            [attr.height]="bar.height"
          >
            <title>{{ bar.title }}</title>
          </rect>
        }
        <line x1="0" [attr.x2]="width" [attr.y1]="height" [attr.y2]="height" />
      </svg>
      <figcaption>
        <span>0 mm</span>
        <span>{{ end() }} and more</span>
      </figcaption>
    </figure>
  `,
  styleUrl: './wall-chart.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class WallChart {
  readonly wall = input.required<WallReport>();
  /** Millimetres per unit of the file. */
  readonly millimetres = input.required<number>();

  protected readonly width = width;
  protected readonly height = height;
  protected readonly viewBox = `0 0 ${width} ${height + 1}`;
  protected readonly end = computed(() => this.length(this.wall().histogram.to));
  protected readonly facts = computed(() => {
    const { min, p5, median } = this.wall();
    return [
      { name: 'Thinnest wall', value: this.length(min) },
      { name: '5 % are thinner than', value: this.length(p5) },
      { name: 'Usual wall', value: this.length(median) },
    ];
  });
  protected readonly bars = computed(() => {
    const { counts, from, to } = this.wall().histogram;
    const most = Math.max(1, ...counts);
    const step = width / counts.length;
    const total = counts.reduce((sum, count) => sum + count, 0);
    return counts.map((count, i) => {
      const tall = (height * count) / most;
      const low = from + ((to - from) * i) / counts.length;
      const high = from + ((to - from) * (i + 1)) / counts.length;
      const share = `${((100 * count) / Math.max(1, total)).toFixed(1)} %`;
      const title = `${this.length(low)} to ${this.length(high)}: ${share}`;
      return { x: i * step + 0.5, y: height - tall, width: step - 1, height: tall, title };
    });
  });
  protected readonly description = computed(() => {
    const { samples } = this.wall();
    const facts = this.facts().map((fact) => `${fact.name} ${fact.value}`);
    return `How often each wall thickness was measured, from ${writeCount(samples)} samples. ${facts.join(', ')}.`;
  });

  private length(value: number): string {
    const lengthMm = value * this.millimetres();
    return lengthMm < 10 ? `${lengthMm.toFixed(2)} mm` : writeLengthMm(lengthMm);
  }
}
