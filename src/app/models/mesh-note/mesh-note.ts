import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import { MatIcon } from '@angular/material/icon';
import { type MeshReport } from '../../../../shared/jobs/model-inspect.js';
import { Notice } from '../../ui/notice/notice';
import { meshCounts, meshInWords, nextSteps } from '../mesh-words';

/** The report of an inspection: what the file is, what was found, and what it means for planning. */
@Component({
  selector: 'sw-mesh-note',
  imports: [MatIcon, Notice],
  templateUrl: './mesh-note.html',
  styleUrl: './mesh-note.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class MeshNote {
  readonly report = input.required<MeshReport>();

  protected readonly words = computed(() => meshInWords(this.report()));
  protected readonly counts = computed(() => meshCounts(this.report()));
  protected readonly steps = computed(() => nextSteps(this.report()));
}
