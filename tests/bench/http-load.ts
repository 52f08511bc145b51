/** Requests over kept connections, some at once: what rows about routes send. */
import { Agent, request, type RequestOptions } from 'node:http';

export interface HttpLoad {
  /** Requests in all, and at once. */
  requests: number;
  atOnce: number;
  headers: Record<string, string>;
}

/** Sends the requests; the time of each in ms, and how many a second. */
export async function loadHttp(addressOf: (i: number) => string, { requests, atOnce, headers }: HttpLoad) {
  const agent = new Agent({ keepAlive: true, maxSockets: atOnce });
  const times: number[] = [];
  let next = 0;
  const started = performance.now();
  const worker = async (): Promise<void> => {
    while (next < requests) {
      const i = next++;
      const from = performance.now();
      await get(addressOf(i), { agent, headers });
      times[i] = performance.now() - from;
    }
  };
  await Promise.all(Array.from({ length: atOnce }, worker));
  const perSecond = requests / ((performance.now() - started) / 1000);
  agent.destroy();
  return { times, perSecond };
}

function get(address: string, options: RequestOptions): Promise<void> {
  return new Promise((resolve, reject) => {
    request(address, options, (response) => {
      if (response.statusCode !== 200) reject(new Error(`${address} answered ${response.statusCode}.`));
      response.resume().on('end', resolve).on('error', reject);
    })
      .on('error', reject)
      .end();
  });
}
