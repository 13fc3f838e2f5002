import type { Request } from 'express';
import { type MaterialResponse, materialRequest } from '../../../shared/api/materials.contract.js';
import { materialProfile } from '../../../shared/jobs/material-profile.js';
import { idOf, parseBody } from '../../platform/http/parse.js';
import type { Route } from '../../platform/http/routes.js';
import { currentSession } from '../../platform/http/session-context.js';
import { createMaterialNotFound } from './materials.errors.js';
import type { Material } from './materials.repository.js';
import type { MaterialsService } from './materials.service.js';

export function createMaterialsRoutes({ materials }: { materials: MaterialsService }): Route[] {
  const workshopId = () => currentSession().workshopId;
  const keyOf = (req: Request) => ({
    id: idOf(req, createMaterialNotFound),
    workshopId: workshopId(),
  });

  return [
    {
      method: 'get',
      path: '/api/materials',
      access: 'material.read',
      handle: async (_req, res) => {
        const list = await materials.list(workshopId());
        res.json({ materials: list.map(toResponse) });
      },
    },
    {
      method: 'post',
      path: '/api/materials',
      access: 'material.write',
      handle: async (req, res) => {
        const { profile } = parseBody(materialRequest, req);
        res.status(201).json(toResponse(await materials.create(workshopId(), profile)));
      },
    },
    {
      method: 'get',
      path: '/api/materials/:id',
      access: 'material.read',
      handle: async (req, res) => {
        res.json(toResponse(await materials.get(keyOf(req))));
      },
    },
    {
      method: 'put',
      path: '/api/materials/:id',
      access: 'material.write',
      handle: async (req, res) => {
        const change = parseBody(materialRequest, req);
        res.json(toResponse(await materials.replace(keyOf(req), change)));
      },
    },
    {
      method: 'delete',
      path: '/api/materials/:id',
      access: 'material.write',
      handle: async (req, res) => {
        await materials.remove(keyOf(req));
        res.status(204).end();
      },
    },
  ];
}

/** A profile stored before something was added to it gets its default. */
function toResponse({ id, profile, version, updatedAt }: Material): MaterialResponse {
  return {
    id,
    profile: materialProfile.parse(profile),
    version,
    updatedAt: updatedAt.toISOString(),
  };
}
