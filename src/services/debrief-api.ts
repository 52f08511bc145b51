import {
  debriefSchema,
  receivedRemarkPageSchema,
  type Debrief,
  type NewRemark,
  type NewSignOff,
  type ReceivedRemark,
} from '#shared/contracts/debrief.ts';
import type { Page } from '#shared/contracts/paging.ts';
import { api } from './http-client.ts';

const at = (id: string, rest: string): string => `/api/attempts/${encodeURIComponent(id)}/${rest}`;

export const getDebrief = (id: string, signal?: AbortSignal): Promise<Debrief> =>
  api.get(at(id, 'debrief'), debriefSchema, { signal });

export const writeRemark = (id: string, remark: NewRemark): Promise<Debrief> =>
  api.post(at(id, 'remarks'), remark, debriefSchema);

export const withdrawRemark = (id: string, remark: string): Promise<Debrief> =>
  api.post(at(id, `remarks/${encodeURIComponent(remark)}/withdraw`), undefined, debriefSchema);

export const signAttempt = (id: string, body: NewSignOff): Promise<Debrief> =>
  api.post(at(id, 'sign-offs'), body, debriefSchema);

/** Address of the printed sheet; the browser opens it with the session's cookies. */
export const sheetAddress = (id: string): string => at(id, 'sheet.pdf');

export const listReceivedRemarks = (
  page: number,
  pageSize: number,
  signal?: AbortSignal,
): Promise<Page<ReceivedRemark>> =>
  api.get('/api/remarks', receivedRemarkPageSchema, { query: { page, pageSize }, signal });
