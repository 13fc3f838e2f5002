import type { Request } from 'express';
import type { Route } from '../../platform/http/routes.js';
import { idOf } from '../../platform/http/parse.js';
import { currentSession, type Session } from '../../platform/http/session-context.js';
import { streamJobEvents } from './job-events.js';
import type { JobMonitor } from './job-monitor.js';
import { createJobNotFound } from './jobs.errors.js';
import { toJobResponse } from './jobs.mapper.js';
import type { JobsRepository } from './jobs.repository.js';

export function createJobsRoutes(deps: {
  jobs: Pick<JobsRepository, 'find' | 'cancel' | 'enough'>;
  monitor: JobMonitor;
  isStillLive: (session: Session) => Promise<boolean>;
}): Route[] {
  const { jobs, monitor } = deps;

  async function find(req: Request) {
    const { workshopId } = currentSession();
    const job = await jobs.find({ id: idOf(req, createJobNotFound), workshopId });
    if (!job) throw createJobNotFound();
    return job;
  }

  return [
    {
      method: 'get',
      path: '/api/jobs/:id',
      access: 'job.read',
      handle: async (req, res) => {
        res.json(toJobResponse(await find(req)));
      },
    },
    {
      method: 'post',
      path: '/api/jobs/:id/cancel',
      access: 'job.cancel',
      handle: async (req, res) => {
        await jobs.cancel(await find(req));
        res.json(toJobResponse(await find(req)));
      },
    },
    {
      method: 'post',
      path: '/api/jobs/:id/enough',
      access: 'job.cancel',
      handle: async (req, res) => {
        await jobs.enough(await find(req));
        res.json(toJobResponse(await find(req)));
      },
    },
    {
      method: 'get',
      path: '/api/jobs/:id/events',
      access: 'job.read',
      handle: async (req, res) => {
        const session = currentSession();
        const job = toJobResponse(await find(req));
        const mayStillSee = () => deps.isStillLive(session);
        streamJobEvents({ res, job, monitor, mayStillSee });
      },
    },
  ];
}
