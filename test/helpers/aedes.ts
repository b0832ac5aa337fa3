import { Aedes, type AedesOptions } from 'aedes';
import { once } from 'node:events';
import { createServer, type AddressInfo, type Socket } from 'node:net';
import { onTestFinished } from 'vitest';

/** A broker that speaks MQTT 3.1.1 only, apart from any of ours. */
export const startAedes = async (
  options: AedesOptions = {},
): Promise<{ url: string; broker: Aedes }> => {
  const broker = await Aedes.createBroker(options);
  const sockets = new Set<Socket>();
  const server = createServer((socket) => {
    sockets.add(socket);
    socket.once('close', () => sockets.delete(socket));
    broker.handle(socket);
  }).listen(0, '127.0.0.1');
  await once(server, 'listening');
  onTestFinished(() => {
    broker.close();
    server.close();
    for (const socket of sockets) socket.destroy();
  });
  return { url: `mqtt://127.0.0.1:${(server.address() as AddressInfo).port}`, broker };
};
