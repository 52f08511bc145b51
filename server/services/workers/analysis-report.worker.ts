/** Thread that computes and prints analysis reports. */
import { analysisReportPdf } from '../../reports/pdf/analysis-report.ts';
import { reportFigures, ReportRefusal } from '../studies/report-figures.ts';
import { reportJobSchema } from '../studies/report-job.ts';
import { answerJobs } from './answer-jobs.ts';

answerJobs(async (message) => {
  const started = performance.now();
  try {
    const figures = reportFigures(reportJobSchema.parse(message));
    const computed = performance.now();
    const pdf = new Uint8Array(await analysisReportPdf(figures));
    return { pdf, computeMs: computed - started, drawMs: performance.now() - computed };
  } catch (error) {
    if (error instanceof ReportRefusal) return { refused: error.message };
    throw error;
  }
});
