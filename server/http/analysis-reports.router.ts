import { Router } from 'express';
import { analysisReportSchema } from '#shared/contracts/studies.ts';
import type { Services } from '../services/create-services.ts';
import { parse } from './parse.ts';
import { actorOf, callerOf } from './session.middleware.ts';
import { attachment } from './uploads.ts';

export function analysisReportsRouter({ printAnalysis }: Pick<Services, 'printAnalysis'>): Router {
  const router = Router();

  router.post('/analysis', async (request, response) => {
    const report = await printAnalysis(actorOf(response), parse(analysisReportSchema, request.body), callerOf(request));
    response.set({ 'content-type': 'application/pdf', 'content-disposition': attachment(report.fileName) });
    response.send(report.bytes);
  });

  return router;
}
