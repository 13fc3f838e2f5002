import { millimetresPerUnit, type ModelScale } from '../../../shared/api/model-scale.js';
import { noChoices } from '../../../shared/jobs/mending-choices.js';
import { mayBePlanned, type MeshReport } from '../../../shared/jobs/model-inspect.js';
import type { ModelResponse, RevisionSummary } from '../../../shared/api/models.contract.js';
import { toJobResponse } from '../jobs/jobs.mapper.js';
import type { ModelView, RevisionView } from './models.service.js';

export function toModelResponse({
  model,
  job,
  createdByName,
  planCount,
}: ModelView): ModelResponse {
  const { revision } = model;
  return {
    id: model.id,
    name: model.name,
    createdAt: model.createdAt.toISOString(),
    createdBy: createdByName,
    planCount,
    revision: {
      id: revision.id,
      number: revision.number,
      fileName: revision.fileName,
      fileBytes: revision.fileBytes,
      createdAt: revision.createdAt.toISOString(),
      report: revision.report,
      choices: revision.choices ?? revision.report?.choices ?? noChoices,
      isAccepted: revision.isAccepted,
      isPlannable:
        revision.report !== null &&
        job.settledAt !== null &&
        mayBePlanned(revision.report, revision.isAccepted),
      scaleConfirmed: revision.scaleConfirmed,
      scale: revision.scale,
      scaleReason: revision.scaleReason,
      ...scaledMeasures(revision),
      hasThumbnail: revision.thumbnailKey !== null,
      hasView: revision.viewKey !== null,
      viewTriangles: revision.viewTriangles,
      job: toJobResponse(job),
    },
  };
}

export function toRevisionSummary({
  revision,
  createdByName,
  planCount,
}: RevisionView): RevisionSummary {
  const { sizeMm, volumeMm3 } = scaledMeasures(revision);
  return {
    id: revision.id,
    number: revision.number,
    fileName: revision.fileName,
    fileBytes: revision.fileBytes,
    createdAt: revision.createdAt.toISOString(),
    createdBy: createdByName,
    triangles: revision.report?.triangles ?? null,
    sizeMm,
    volumeMm3,
    planCount,
  };
}

type Scaled = Pick<
  ModelResponse['revision'],
  'millimetresPerUnit' | 'sizeMm' | 'volumeMm3' | 'areaMm2'
>;

/** Length, area and volume in millimetres: the factor, its square and its cube. */
function scaledMeasures({
  report,
  scale,
}: {
  report: MeshReport | null;
  scale: ModelScale;
}): Scaled {
  if (!report) return { millimetresPerUnit: null, sizeMm: null, volumeMm3: null, areaMm2: null };
  const factor = millimetresPerUnit(scale, report.size);
  const [x, y, z] = report.size;
  return {
    millimetresPerUnit: factor,
    sizeMm: [x * factor, y * factor, z * factor],
    volumeMm3: report.volume * factor ** 3,
    areaMm2: report.area * factor ** 2,
  };
}
