import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import { type RevisionSummary } from '../../../../shared/api/models.contract.js';
import { writeCount, writeMoment, writeSizeMm, writeVolume } from '../../ui/format/quantities';
import { comparisonInWords } from './revision-words';

/** The revisions of a model, the newest first, and how it differs from the one before. */
@Component({
  selector: 'sw-revision-list',
  template: `
    @if (comparison()) {
      <p>{{ comparison() }}</p>
    }
    <div class="wide" tabindex="0" role="group" aria-label="Revisions">
      <table class="sw-table">
        <caption class="sw-unseen">
          Revisions, the newest first
        </caption>
        <thead>
          <tr>
            <th scope="col" class="sw-number">No.</th>
            <th scope="col">Uploaded</th>
            <th scope="col">File</th>
            <th scope="col" class="sw-number">Triangles</th>
            <th scope="col" class="sw-number">Size</th>
            <th scope="col" class="sw-number">Volume</th>
            <th scope="col" class="sw-number">Plans</th>
          </tr>
        </thead>
        <tbody>
          @for (row of rows(); track row.number) {
            <tr>
              <th scope="row" class="sw-number">{{ row.number }}</th>
              <td>{{ row.uploaded }}</td>
              <td>{{ row.file }}</td>
              <td class="sw-number">{{ row.triangles }}</td>
              <td class="sw-number">{{ row.size }}</td>
              <td class="sw-number">{{ row.volume }}</td>
              <td class="sw-number">{{ row.plans }}</td>
            </tr>
          }
        </tbody>
      </table>
    </div>
  `,
  styles: `
    :host {
      display: grid;
      gap: 12px;
      min-width: 0;
    }

    .wide {
      overflow-x: auto;
    }

    td,
    th {
      white-space: nowrap;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class RevisionList {
  readonly revisions = input.required<readonly RevisionSummary[]>();

  protected readonly comparison = computed(() => {
    const [now, before] = this.revisions();
    return now && before ? comparisonInWords(now, before) : '';
  });
  protected readonly rows = computed(() =>
    this.revisions().map((revision) => ({
      number: revision.number,
      uploaded: `${writeMoment(revision.createdAt)}, ${revision.createdBy}`,
      file: revision.fileName,
      triangles: revision.triangles === null ? '–' : writeCount(revision.triangles),
      size: revision.sizeMm ? writeSizeMm(revision.sizeMm) : '–',
      volume: revision.volumeMm3 === null ? '–' : writeVolume(revision.volumeMm3),
      plans: writeCount(revision.planCount),
    })),
  );
}
