import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import { type MeshReport } from '../../../../shared/jobs/model-inspect.js';
import { writeArea, writeSizeMm, writeVolume } from '../../ui/format/quantities';
import { Notice } from '../../ui/notice/notice';
import { changeRows, faultsInWords, hopelessSteps, meshInWords } from '../mesh-words';

/** What a colleague would note about a file: what it is, what was wrong, what was done. */
@Component({
  selector: 'sw-mesh-note',
  imports: [Notice],
  templateUrl: './mesh-note.html',
  styleUrl: './mesh-note.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class MeshNote {
  readonly report = input.required<MeshReport>();
  /** Millimetres per unit of the file. */
  readonly millimetres = input.required<number>();

  protected readonly words = computed(() => meshInWords(this.report()));
  protected readonly faults = computed(() => faultsInWords(this.report()));
  protected readonly steps = hopelessSteps;
  protected readonly rows = computed(() => {
    const report = this.report();
    if (report.mending.length === 0) return [];
    const millimetres = this.millimetres();
    return changeRows(report, {
      size: (size) => writeSizeMm(size.map((side) => side * millimetres)),
      area: (area) => writeArea(area * millimetres ** 2),
      volume: (volume) => writeVolume(volume * millimetres ** 3),
    });
  });
}
