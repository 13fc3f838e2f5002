import type { Request } from 'express';
import { envelopeRequest } from '../../../shared/api/envelopes.contract.js';
import { idOf, parseBody } from '../../platform/http/parse.js';
import type { Route } from '../../platform/http/routes.js';
import { currentSession } from '../../platform/http/session-context.js';
import { createEnvelopeNotFound } from './envelopes.errors.js';
import { toEnvelopeResponse } from './envelopes.mapper.js';
import type { EnvelopesService } from './envelopes.service.js';

export function createEnvelopesRoutes({ envelopes }: { envelopes: EnvelopesService }): Route[] {
  const workshopId = () => currentSession().workshopId;
  const keyOf = (req: Request) => ({
    id: idOf(req, createEnvelopeNotFound),
    workshopId: workshopId(),
  });

  return [
    {
      method: 'get',
      path: '/api/envelopes',
      access: 'envelope.read',
      handle: async (_req, res) => {
        const list = await envelopes.list(workshopId());
        res.json({ envelopes: list.map(toEnvelopeResponse) });
      },
    },
    {
      method: 'post',
      path: '/api/envelopes',
      access: 'envelope.write',
      handle: async (req, res) => {
        const data = parseBody(envelopeRequest, req);
        res.status(201).json(toEnvelopeResponse(await envelopes.create(workshopId(), data)));
      },
    },
    {
      method: 'get',
      path: '/api/envelopes/:id',
      access: 'envelope.read',
      handle: async (req, res) => {
        res.json(toEnvelopeResponse(await envelopes.get(keyOf(req))));
      },
    },
    {
      method: 'put',
      path: '/api/envelopes/:id',
      access: 'envelope.write',
      handle: async (req, res) => {
        const data = parseBody(envelopeRequest, req);
        res.json(toEnvelopeResponse(await envelopes.replace(keyOf(req), data)));
      },
    },
    {
      method: 'delete',
      path: '/api/envelopes/:id',
      access: 'envelope.write',
      handle: async (req, res) => {
        await envelopes.remove(keyOf(req));
        res.status(204).end();
      },
    },
  ];
}
