import type { Request, RequestHandler, Response } from 'express';
import { z } from 'zod';
import { mendRequest, modelPatchRequest } from '../../../shared/api/models.contract.js';
import { idOf, parse, parseBody } from '../../platform/http/parse.js';
import type { Route } from '../../platform/http/routes.js';
import { sendStored } from '../../platform/http/send-stored.js';
import { currentSession } from '../../platform/http/session-context.js';
import type { FileStorage } from '../../platform/storage/disk-storage.js';
import { createModelNotFound, createNoPictureYet } from './models.errors.js';
import { toModelResponse, toRevisionSummary } from './models.mapper.js';
import type { ModelsService } from './models.service.js';
import { discardUpload, receivedFile } from './receive-upload.js';

const uploadFields = z.object({ name: modelPatchRequest.shape.name });

export function createModelsRoutes(deps: {
  models: ModelsService;
  storage: FileStorage;
  receiveUpload: readonly RequestHandler[];
}): Route[] {
  const { models, storage } = deps;
  const keyOf = (req: Request) => ({
    id: idOf(req, createModelNotFound),
    workshopId: currentSession().workshopId,
  });

  /** Said before a byte of the file has come. */
  const requireModel: RequestHandler = (req, _res, next) => {
    models.find(keyOf(req)).then(() => next(), next);
  };

  /** Whatever the refusal is, the file goes. After it was taken in, this finds nothing. */
  async function orDiscard(req: Request, work: () => Promise<void>): Promise<void> {
    try {
      await work();
    } catch (error) {
      await discardUpload(req);
      throw error;
    }
  }

  async function upload(req: Request, res: Response): Promise<void> {
    const { userId, workshopId } = currentSession();
    await orDiscard(req, async () => {
      const file = await receivedFile(req);
      const { name } = parse(uploadFields, { ...req.body });
      const key = await models.add({ workshopId, userId, file, name });
      res.status(201).json(toModelResponse(await models.get(key)));
    });
  }

  async function uploadRevision(req: Request, res: Response): Promise<void> {
    const { userId } = currentSession();
    await orDiscard(req, async () => {
      const key = keyOf(req);
      const file = await receivedFile(req);
      await models.addRevision(key, { userId, file });
      res.status(201).json(toModelResponse(await models.get(key)));
    });
  }

  function sendFile(which: 'thumbnailKey' | 'viewKey', type: string) {
    return async (req: Request, res: Response): Promise<void> => {
      const key = (await models.find(keyOf(req))).revision[which];
      if (!key) throw createNoPictureYet();
      await sendStored(res, storage, { key, type });
    };
  }

  return [
    {
      method: 'get',
      path: '/api/models',
      access: 'model.read',
      handle: async (_req, res) => {
        const list = await models.list(currentSession().workshopId);
        res.json({ models: list.map(toModelResponse) });
      },
    },
    {
      method: 'post',
      path: '/api/models',
      access: 'model.write',
      before: deps.receiveUpload,
      handle: upload,
    },
    {
      method: 'get',
      path: '/api/models/:id',
      access: 'model.read',
      handle: async (req, res) => {
        res.json(toModelResponse(await models.get(keyOf(req))));
      },
    },
    {
      method: 'patch',
      path: '/api/models/:id',
      access: 'model.write',
      handle: async (req, res) => {
        const changes = parseBody(modelPatchRequest, req);
        await models.change(keyOf(req), changes);
        res.json(toModelResponse(await models.get(keyOf(req))));
      },
    },
    {
      method: 'get',
      path: '/api/models/:id/revisions',
      access: 'model.read',
      handle: async (req, res) => {
        const revisions = await models.revisions(keyOf(req));
        res.json({ revisions: revisions.map(toRevisionSummary) });
      },
    },
    {
      method: 'post',
      path: '/api/models/:id/revisions',
      access: 'model.write',
      before: [requireModel, ...deps.receiveUpload],
      handle: uploadRevision,
    },
    {
      method: 'post',
      path: '/api/models/:id/mending',
      access: 'model.write',
      handle: async (req, res) => {
        const { choices } = parseBody(mendRequest, req);
        await models.mend(keyOf(req), choices);
        res.json(toModelResponse(await models.get(keyOf(req))));
      },
    },
    {
      method: 'delete',
      path: '/api/models/:id',
      access: 'model.write',
      handle: async (req, res) => {
        await models.remove(keyOf(req));
        res.status(204).end();
      },
    },
    {
      method: 'get',
      path: '/api/models/:id/thumbnail',
      access: 'model.read',
      handle: sendFile('thumbnailKey', 'image/png'),
    },
    {
      method: 'get',
      path: '/api/models/:id/view',
      access: 'model.read',
      handle: sendFile('viewKey', 'model/gltf-binary'),
    },
  ];
}
