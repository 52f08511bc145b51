/** Thread that integrates an attempt again for its printed sheet. */
import { debriefJobSchema, debriefSeries } from '../debrief/debrief-series.ts';
import { answerJobs } from './answer-jobs.ts';

answerJobs((message) => debriefSeries(debriefJobSchema.parse(message)));
