/** The baseline of the live class: socket.io alone, which passes on what one socket sends to all others. Prints its port. */
import { createServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import { Server } from 'socket.io';

const http = createServer();
const io = new Server(http, { perMessageDeflate: false });
io.on('connection', (socket) => {
  void socket.join('all');
  socket.on('frame', (message: unknown) => void socket.to('all').emit('frame', message));
  socket.on('row', (message: unknown) => void socket.to('board').emit('row', message));
  socket.on('board', () => void socket.join('board'));
});
http.listen(0, '127.0.0.1', () => console.log(`READY ${(http.address() as AddressInfo).port}`)); // listens on a port
