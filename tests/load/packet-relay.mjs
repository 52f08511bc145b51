// Carries the packets of a tunnel between two ends, each packet late and some of them never: a bad network where the
// kernel has no emulator of one. node packet-relay.mjs PORT ADDRESS_A ADDRESS_B PEER_A PEER_B DELAY_MS LOSS_SHARE SEED SECONDS
import dgram from 'node:dgram';

const [port, atA, atB, peerA, peerB, delayMs, lossShare, seed, seconds] = process.argv.slice(2);
let state = Number(seed) >>> 0 || 1;
/** Xorshift: uniform in 0…1. */
function uniform() {
  state ^= state << 13;
  state >>>= 0;
  state ^= state >>> 17;
  state ^= state << 5;
  state >>>= 0;
  return state / 2 ** 32;
}
let carried = 0;
let lost = 0;
const sockets = [atA, atB].map(() => dgram.createSocket('udp4'));
for (const [i, socket] of sockets.entries()) {
  const out = sockets[1 - i];
  const peer = i === 0 ? peerB : peerA;
  socket.on('message', (packet) => {
    if (uniform() < Number(lossShare)) {
      lost += 1;
      return;
    }
    carried += 1;
    setTimeout(() => out.send(packet, Number(port), peer), Number(delayMs));
  });
  socket.on('error', (error) => console.error(`RELAY ${error.message}`));
  socket.bind(Number(port), i === 0 ? atA : atB);
}
setInterval(() => console.log(`RELAY ${carried} ${lost}`), 500);
console.log('RELAY ready');
setTimeout(() => process.exit(0), 1000 * Number(seconds));
