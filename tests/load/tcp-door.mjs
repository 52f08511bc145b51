// Passes TCP connections on: node tcp-door.mjs ADDRESS PORT TARGET_ADDRESS TARGET_PORT SECONDS
import net from 'node:net';

const [address, port, targetAddress, targetPort, seconds] = process.argv.slice(2);
net
  .createServer((client) => {
    const upstream = net.connect(Number(targetPort), targetAddress);
    client.pipe(upstream).pipe(client);
    for (const socket of [client, upstream]) {
      socket.setNoDelay(true);
      socket.on('error', () => {
        client.destroy();
        upstream.destroy();
      });
      socket.on('close', () => {
        client.destroy();
        upstream.destroy();
      });
    }
  })
  .listen(Number(port), address, () => console.log('DOOR ready'));
setTimeout(() => process.exit(0), 1000 * Number(seconds));
