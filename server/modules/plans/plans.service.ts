import { mayBePlanned } from '../../../shared/jobs/model-inspect.js';
import { type JointWishes, usualJoints } from '../../../shared/jobs/joint-plan.js';
import { type MaterialProfile, usualMaterial } from '../../../shared/jobs/material-profile.js';
import { planOutput } from '../../../shared/jobs/plan-make.js';
import { type PlanWishes, usualWishes } from '../../../shared/jobs/plan-wishes.js';
import type { CutTree, OrientationWish } from '../../../shared/jobs/recipe.js';
import type { EnvelopeResponse } from '../../../shared/api/envelopes.contract.js';
import type { planRequest } from '../../../shared/api/plans.contract.js';
import type { z } from 'zod';
import { millimetresPerUnit } from '../../../shared/api/model-scale.js';
import type { Transact } from '../../platform/db/transaction.js';
import type { CreateId } from '../../platform/ids/create-id.js';
import type { FileStorage } from '../../platform/storage/disk-storage.js';
import { planFolder } from '../../platform/storage/storage-keys.js';
import { toEnvelopeResponse } from '../envelopes/envelopes.mapper.js';
import type { Envelope } from '../envelopes/envelopes.model.js';
import type { JobRow, JobsRepository } from '../jobs/jobs.repository.js';
import {
  createModelNotFound,
  createModelNotPlannable,
  createModelNotReady,
} from '../models/models.errors.js';
import type { ModelRow, ModelsRepository } from '../models/models.repository.js';
import {
  createOfferNotFound,
  createOfferOutdated,
  createPlanNotFound,
  createPlanNotReady,
  createProofFailed,
} from './plans.errors.js';
import type { PlanRow, PlansRepository } from './plans.repository.js';
import { usableSpace } from './usable-space.js';

export type PlansService = ReturnType<typeof createPlansService>;

/** A plan with what other modules know about it. */
export interface PlanView {
  readonly plan: PlanRow;
  readonly job: JobRow;
  readonly modelName: string;
  readonly revisionNumber: number;
  readonly createdByName: string;
}

interface Key {
  readonly id: string;
  readonly workshopId: string;
}

interface Owner {
  readonly workshopId: string;
  readonly userId: string;
}

/** All that decides what a plan becomes, but for the model. */
interface Asked {
  readonly envelopes: readonly EnvelopeResponse[];
  readonly wishes: PlanWishes;
  readonly seed: number;
  readonly tree: CutTree | null;
  readonly fromPlan: number | null;
  readonly joints: JointWishes;
  readonly material: MaterialProfile;
  readonly orientations: OrientationWish[];
}

export function createPlansService(deps: {
  plans: PlansRepository;
  jobs: JobsRepository;
  models: Pick<ModelsRepository, 'describeRevisions'>;
  findModel: (key: Key) => Promise<ModelRow>;
  findEnvelope: (key: Key) => Promise<Envelope>;
  /** @throws material.notFound */
  findMaterial: (key: Key) => Promise<{ readonly profile: MaterialProfile }>;
  namesOf: (userIds: readonly string[]) => Promise<Map<string, string>>;
  transact: Transact<{ plans: PlansRepository; models: ModelsRepository; jobs: JobsRepository }>;
  storage: FileStorage;
  clock: () => Date;
  createId: CreateId;
}) {
  const { plans, jobs, storage, transact, clock, createId } = deps;

  async function withContext<P extends PlanRow>(rows: readonly P[]) {
    const found = await jobs.findMany(rows.map((row) => row.jobId));
    const jobOf = new Map(found.map((job) => [job.id, job]));
    const names = await deps.namesOf(rows.map((row) => row.createdBy));
    const revisions = await deps.models.describeRevisions(rows.map((row) => row.revisionId));
    return rows.flatMap((plan) => {
      const job = jobOf.get(plan.jobId);
      const revision = revisions.get(plan.revisionId);
      if (!job || !revision) return []; // Deleted between two queries.
      const createdByName = names.get(plan.createdBy) ?? '';
      return [
        { plan, job, modelName: revision.name, revisionNumber: revision.number, createdByName },
      ];
    });
  }

  async function get(key: Key) {
    const plan = await plans.find(key);
    const [view] = plan ? await withContext([plan]) : [];
    if (!view) throw createPlanNotFound();
    return view;
  }

  /** What a person asks for anew. */
  async function freshly(order: z.output<typeof planRequest> & Owner): Promise<Asked> {
    const { workshopId, seed, wishes = usualWishes } = order;
    const ids = [...new Set([order.envelopeId!, ...order.otherEnvelopeIds])];
    const envelopes: EnvelopeResponse[] = [];
    for (const id of ids)
      envelopes.push(toEnvelopeResponse(await deps.findEnvelope({ id, workshopId })));
    const material = order.materialId
      ? (await deps.findMaterial({ id: order.materialId, workshopId })).profile
      : usualMaterial;
    return {
      envelopes,
      // What leans too far is the material's to say, unless the person said otherwise.
      wishes:
        wishes.overhangDegrees === usualWishes.overhangDegrees
          ? { ...wishes, overhangDegrees: material.overhangDegrees }
          : wishes,
      seed,
      tree: null,
      fromPlan: null,
      joints: order.joints ?? usualJoints,
      material,
      orientations: [],
    };
  }

  /** What another plan of the same search was asked for, and its cuts. */
  async function fromOffer(
    { planId, offer }: { planId: string; offer: number },
    now: { workshopId: string; revisionId: string; factor: number },
  ): Promise<Asked> {
    const { recipe, offers, asked } = await madeBefore(planId, now);
    const tree = offers[offer]?.tree;
    if (!tree) throw createOfferNotFound();
    // Other cuts make other pieces: choices for single seams and pieces mean nothing there.
    return {
      ...asked,
      tree,
      joints: { ...recipe.joints, seams: [], skins: [] },
      orientations: [],
    };
  }

  /** The same cuts as a plan that was made, with other joints or orientations. */
  async function fromPlan(
    { planId, joints, orientations }: NonNullable<z.output<typeof planRequest>['fromPlan']>,
    now: { workshopId: string; revisionId: string; factor: number },
  ): Promise<Asked> {
    const { recipe, asked } = await madeBefore(planId, now);
    return {
      ...asked,
      tree: recipe.tree,
      joints: joints ?? recipe.joints,
      orientations: orientations ?? recipe.orientations,
    };
  }

  /** A plan that can be made again: of the model as it is now. */
  async function madeBefore(
    planId: string,
    now: { workshopId: string; revisionId: string; factor: number },
  ) {
    const found = await plans.find({ id: planId, workshopId: now.workshopId });
    if (!found) throw createPlanNotFound();
    if (!found.result) throw createPlanNotReady();
    if (found.revisionId !== now.revisionId || found.millimetresPerUnit !== now.factor)
      throw createOfferOutdated();
    // Plans of before get the defaults of what was added since.
    const { recipe, offers } = planOutput.parse(found.result);
    const asked = {
      envelopes: [found.envelope, ...(found.otherEnvelopes ?? [])],
      wishes: found.wishes ?? usualWishes,
      seed: found.seed,
      fromPlan: found.number,
      material: recipe.material,
    };
    return { recipe, offers, asked };
  }

  return {
    list: async (filter: { workshopId: string; modelId?: string | undefined }) =>
      withContext(await plans.list(filter)),

    get,

    /** A plan that has its result. @throws plan.notFound, plan.notReady */
    async getFinished(key: Key) {
      const view = await get(key);
      const { result } = view.plan;
      if (!result) throw createPlanNotReady();
      return { ...view, result };
    },

    /**
     * Queues a plan of a model, all as it is now, or another of the plans that a search found.
     * @throws model.notFound, envelope.notFound, model.notReady, model.notPlannable,
     *   plan.notFound, plan.notReady, plan.offerNotFound, plan.offerOutdated
     */
    async create(order: z.output<typeof planRequest> & Owner): Promise<Key> {
      const { workshopId, userId, modelId } = order;
      const model = await deps.findModel({ id: modelId, workshopId });
      const [inspection] = await jobs.findMany([model.revision.jobId]);
      const { solidKey, factor } = plannable(model, inspection);
      const now = { workshopId, revisionId: model.revision.id, factor };
      const asked = order.fromOffer
        ? await fromOffer(order.fromOffer, now)
        : order.fromPlan
          ? await fromPlan(order.fromPlan, now)
          : await freshly(order);
      const { seed, wishes, envelopes } = asked;
      const [envelope, ...otherEnvelopes] = envelopes;
      const [space, ...otherSpaces] = envelopes.map(usableSpace);
      const [id, jobId] = [createId(), createId()];
      await transact(async (repos) => {
        const number = await repos.models.nextPlanNumber({ id: modelId, workshopId });
        if (number === null) throw createModelNotFound();
        await repos.plans.add({
          id,
          workshopId,
          modelId,
          revisionId: model.revision.id,
          number,
          seed,
          envelope: envelope!,
          otherEnvelopes,
          wishes,
          fromPlan: asked.fromPlan,
          millimetresPerUnit: factor,
          jobId,
          createdAt: clock(),
          createdBy: userId,
        });
        await repos.jobs.add({
          id: jobId,
          workshopId,
          kind: 'plan.make',
          subjectId: id,
          input: {
            solidKey,
            modelName: model.name,
            millimetresPerUnit: factor,
            space: space!,
            otherSpaces,
            wishes,
            tree: asked.tree,
            joints: asked.joints,
            material: asked.material,
            orientations: asked.orientations,
            seed,
            outputPrefix: planFolder({ workshopId, planId: id }),
          },
        });
      });
      return { id, workshopId };
    },

    /** A finished plan whose files may be taken. @throws plan.proofFailed and as getFinished */
    async getDownloadable(key: Key) {
      const view = await this.getFinished(key);
      if (!view.plan.allPassed && !view.plan.release) throw createProofFailed();
      return view;
    },

    /**
     * Records that a person wants the files of a plan although a check failed; the first word
     * stands. A plan that passed needs none and gets none.
     */
    async release(key: Key, { userId, reason }: { userId: string; reason: string }) {
      const view = await this.getFinished(key);
      if (view.plan.allPassed || view.plan.release) return;
      const names = await deps.namesOf([userId]);
      const by = names.get(userId) ?? '';
      await plans.storeRelease(key, { reason, by, at: clock().toISOString() });
    },

    /** Removes a plan with its files; a job that still runs is told to stop. */
    async remove(key: Key): Promise<void> {
      const plan = await plans.find(key);
      if (!plan) throw createPlanNotFound();
      await transact(async (repos) => {
        await repos.plans.remove(key);
        await repos.jobs.removeOrCancel({ id: plan.jobId, workshopId: key.workshopId });
      });
      await storage.remove(planFolder({ workshopId: key.workshopId, planId: key.id }));
    },
  };
}

function plannable(
  { revision }: ModelRow,
  inspection: JobRow | undefined,
): { solidKey: string; factor: number } {
  const { report, solidKey, scale, isAccepted } = revision;
  if (!report && inspection?.settledAt)
    throw createModelNotPlannable(
      inspection.error?.message ?? 'The inspection was cancelled. Upload the model again.',
    );
  if (!report) throw createModelNotReady();
  // The report at hand is that of the choices before.
  if (inspection && !inspection.settledAt) throw createModelNotReady();
  if (!mayBePlanned(report, isAccepted) || !solidKey)
    throw createModelNotPlannable(
      report.refusal ?? report.asks[0]?.sentence ?? 'No plan can be made of this model.',
    );
  return { solidKey, factor: millimetresPerUnit(scale, report.size) };
}
