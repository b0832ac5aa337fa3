/** A part: a bare relay, MQTT in and socket.io out, with nothing between. */
import { createServer } from 'node:net';
import { createServer as createHttp } from 'node:http';
import { Aedes } from 'aedes';
import { Server } from 'socket.io';

const listening = (server: ReturnType<typeof createServer>) =>
  new Promise<number>((resolve) =>
    server.listen(0, '127.0.0.1', () => {
      const address = server.address();
      resolve(typeof address === 'object' ? (address?.port ?? 0) : 0);
    }),
  );

const http = createHttp();
const io = new Server(http, { transports: ['websocket'], perMessageDeflate: false });
const broker = await Aedes.createBroker();
broker.authorizePublish = (_client, packet, done) => {
  io.emit('live', packet.payload);
  done(null);
};
const mqtt = createServer((socket) => void broker.handle(socket));
const [mqttPort, httpPort] = [await listening(mqtt), await listening(http)];
process.send?.({ broker: `mqtt://127.0.0.1:${mqttPort}`, http: `http://127.0.0.1:${httpPort}` });
process.on('SIGTERM', () => process.exit(0));
