import { createAdapter } from '@socket.io/redis-adapter';
import { Redis } from 'ioredis';
import type { Logger } from '../config/log.ts';

/**
 * Connections to the Redis over which the processes tell each other what their sockets must hear. While it is away, each
 * process serves its own sockets, and the logs of classes still come together through the database.
 */
export async function connectRedis(url: string, log: Logger) {
  const publisher = new Redis(url, {
    lazyConnect: true,
    maxRetriesPerRequest: null,
    retryStrategy: (n) => Math.min(200 * n, 2000),
  });
  const subscriber = publisher.duplicate();
  let said = false;
  for (const client of [publisher, subscriber]) {
    client.on('error', (error: unknown) => {
      if (!said) log.warn({ err: error }, 'Redis does not answer; trying again');
      said = true;
    });
    client.on('ready', () => {
      if (said) log.info('Redis answers again');
      said = false;
    });
  }
  await Promise.all([publisher.connect(), subscriber.connect()]);
  return {
    adapter: createAdapter(publisher, subscriber),
    /** Rejects or stays silent while Redis is away. */
    ping: (): Promise<unknown> => publisher.ping(),
    close: () => {
      publisher.disconnect();
      subscriber.disconnect();
    },
  };
}
export type RedisLink = Awaited<ReturnType<typeof connectRedis>>;
