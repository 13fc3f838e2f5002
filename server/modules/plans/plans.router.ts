import type { Request } from 'express';
import { z } from 'zod';
import { recordId } from '../../../shared/api/ids.js';
import { planReleaseRequest, planRequest } from '../../../shared/api/plans.contract.js';
import { idOf, parse, parseBody } from '../../platform/http/parse.js';
import type { Route } from '../../platform/http/routes.js';
import { sendStored } from '../../platform/http/send-stored.js';
import { currentSession } from '../../platform/http/session-context.js';
import type { FileStorage } from '../../platform/storage/disk-storage.js';
import { streamPlanArchive } from './plan-archive.js';
import { createPlanNotFound } from './plans.errors.js';
import { toPlanResponse, toPlanSummary } from './plans.mapper.js';
import type { PlansService } from './plans.service.js';

const listQuery = z.object({ modelId: recordId.optional() });

export function createPlansRoutes(deps: { plans: PlansService; storage: FileStorage }): Route[] {
  const { plans, storage } = deps;
  const keyOf = (req: Request) => ({
    id: idOf(req, createPlanNotFound),
    workshopId: currentSession().workshopId,
  });

  return [
    {
      method: 'get',
      path: '/api/plans',
      access: 'plan.read',
      handle: async (req, res) => {
        const { modelId } = parse(listQuery, req.query);
        const list = await plans.list({ workshopId: currentSession().workshopId, modelId });
        res.json({ plans: list.map(toPlanSummary) });
      },
    },
    {
      method: 'post',
      path: '/api/plans',
      access: 'plan.write',
      handle: async (req, res) => {
        const { workshopId, userId } = currentSession();
        const order = parseBody(planRequest, req);
        const key = await plans.create({ workshopId, userId, ...order });
        res.status(201).json(toPlanResponse(await plans.get(key)));
      },
    },
    {
      method: 'get',
      path: '/api/plans/:id',
      access: 'plan.read',
      handle: async (req, res) => {
        res.json(toPlanResponse(await plans.get(keyOf(req))));
      },
    },
    {
      method: 'delete',
      path: '/api/plans/:id',
      access: 'plan.write',
      handle: async (req, res) => {
        await plans.remove(keyOf(req));
        res.status(204).end();
      },
    },
    {
      method: 'get',
      path: '/api/plans/:id/view',
      access: 'plan.read',
      handle: async (req, res) => {
        const { result } = await plans.getFinished(keyOf(req));
        await sendStored(res, storage, { key: result.files.view, type: 'model/gltf-binary' });
      },
    },
    {
      method: 'post',
      path: '/api/plans/:id/release',
      access: 'plan.write',
      handle: async (req, res) => {
        const { reason } = parseBody(planReleaseRequest, req);
        const key = keyOf(req);
        await plans.release(key, { userId: currentSession().userId, reason });
        res.json(toPlanResponse(await plans.get(key)));
      },
    },
    {
      method: 'get',
      path: '/api/plans/:id/download',
      access: 'plan.read',
      handle: async (req, res) => {
        const { plan, modelName, result } = await plans.getDownloadable(keyOf(req));
        await streamPlanArchive({
          res,
          storage,
          files: result.files.archive,
          fileName: `${modelName} plan ${plan.number}.zip`,
          madeAt: plan.createdAt,
        });
      },
    },
  ];
}
