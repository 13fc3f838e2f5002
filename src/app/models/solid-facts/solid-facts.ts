import { ChangeDetectionStrategy, Component, computed, input, output } from '@angular/core';
import { MatButton } from '@angular/material/button';
import { MatIcon } from '@angular/material/icon';
import { type FlatArea, type MeshReport } from '../../../../shared/jobs/model-inspect.js';
import { writeArea, writeCount, writeLengthMm } from '../../ui/format/quantities';
import { genusInWords, proxyInWords } from '../mesh-words';
import { WallChart } from '../wall-chart/wall-chart';

/** What was measured on the solid: walls, openings, smallest features, flat areas. */
@Component({
  selector: 'sw-solid-facts',
  imports: [MatButton, MatIcon, WallChart],
  templateUrl: './solid-facts.html',
  styleUrl: './solid-facts.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class SolidFacts {
  readonly report = input.required<MeshReport>();
  /** Millimetres per unit of the file. */
  readonly millimetres = input.required<number>();
  readonly flatShown = output<FlatArea>();

  protected readonly measures = computed(() => this.report().measures);
  protected readonly facts = computed(() => {
    const report = this.report();
    const measures = this.measures();
    if (!measures) return [];
    const length = (value: number) => this.length(value);
    const { pairs, complete } = measures.crossings;
    const bodies = report.shells - report.cavities;
    return [
      { name: 'Solids', value: writeCount(bodies) },
      { name: 'Closed hollows', value: writeCount(report.cavities) },
      { name: 'Openings', value: genusInWords(measures.genus) },
      { name: 'Smallest solid or hollow', value: length(measures.smallestShell) },
      { name: 'Shortest edge', value: this.fine(measures.shortestEdge) },
      {
        name: 'Crossing triangles',
        value: pairs === 0 ? 'none' : `${complete ? '' : 'more than '}${writeCount(pairs)} pairs`,
      },
    ];
  });
  protected readonly picture = computed(() => proxyInWords(this.report(), this.millimetres()));

  protected length(value: number): string {
    return writeLengthMm(value * this.millimetres());
  }

  protected area(value: number): string {
    return writeArea(value * this.millimetres() ** 2);
  }

  /** Three figures: edges may be far shorter than a tenth of a millimetre. */
  private fine(value: number): string {
    return `${Number((value * this.millimetres()).toPrecision(2))} mm`;
  }
}
