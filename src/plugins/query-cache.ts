import type { PiniaColadaOptions } from '@pinia/colada';

const FRESH_MS = 15_000;
const KEPT_MS = 10 * 60_000;

/** Server state: fresh for fifteen seconds, kept ten minutes, read again when the window or the network comes back. */
export const queryCacheOptions: PiniaColadaOptions = {
  queryOptions: { staleTime: FRESH_MS, gcTime: KEPT_MS, refetchOnWindowFocus: true, refetchOnReconnect: true },
};
