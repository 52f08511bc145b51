import net from 'node:net';

/**
 * A link between a client and a server as TCP shows a bad network: every piece of data is late, and one in ten is late by
 * a retransmission more (and, where asked for, by a varying delay), with everything behind it. (Where the kernel has a network emulator, use that; this needs no rights.)
 */
export async function startSlowLink(
  target: string,
  {
    delayMs,
    lossShare,
    jitterMs = 0,
    random,
  }: { delayMs: number; lossShare: number; jitterMs?: number; random: () => number },
): Promise<{ address: string; stop: () => void }> {
  const { hostname, port } = new URL(target);
  const sockets = new Set<net.Socket>();
  const pass = (from: net.Socket, to: net.Socket): void => {
    // In one queue: timers of their own could overtake each other within a millisecond.
    const waiting: { dueMs: number; data: Buffer }[] = [];
    const pump = (): void => {
      while (waiting.length > 0 && waiting[0].dueMs <= performance.now()) {
        const next = waiting.shift();
        if (next && to.writable) to.write(next.data);
      }
      if (waiting.length > 0) setTimeout(pump, waiting[0].dueMs - performance.now());
    };
    from.on('data', (data) => {
      const retransmission = random() < lossShare ? 200 + 2 * delayMs : 0;
      const late = delayMs + jitterMs * random() + retransmission;
      // What follows waits behind what is late.
      const dueMs = Math.max(waiting.at(-1)?.dueMs ?? 0, performance.now() + late);
      waiting.push({ dueMs, data });
      if (waiting.length === 1) setTimeout(pump, late);
    });
    const end = (): void => void (waiting.length > 0 ? setTimeout(end, 10) : to.destroy());
    from.on('close', () => setTimeout(end, delayMs));
    from.on('error', () => to.destroy());
    sockets.add(from);
  };
  const server = net.createServer((client) => {
    const upstream = net.connect(Number(port), hostname);
    pass(client, upstream);
    pass(upstream, client);
  });
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  const address = server.address();
  const own = typeof address === 'object' && address !== null ? address.port : 0;
  return {
    address: `http://127.0.0.1:${own}`,
    stop: () => {
      server.close();
      for (const socket of sockets) socket.destroy();
    },
  };
}
