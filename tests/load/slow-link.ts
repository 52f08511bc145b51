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
    let dueMs = 0;
    from.on('data', (data) => {
      const retransmission = random() < lossShare ? 200 + 2 * delayMs : 0;
      const late = delayMs + jitterMs * random() + retransmission;
      // What follows waits behind what is late.
      dueMs = Math.max(dueMs, performance.now() + late);
      setTimeout(() => to.writable && to.write(data), dueMs - performance.now());
    });
    from.on('close', () => setTimeout(() => to.destroy(), delayMs));
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
