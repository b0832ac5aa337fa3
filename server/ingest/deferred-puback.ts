import type { IPublishPacket, MqttClient, Packet } from 'mqtt';

/** The part of MQTT.js's client that sends a packet; not public, held to by a contract test. */
interface Sender {
  _sendPacket(packet: Packet, done?: (error?: Error) => void, ...rest: unknown[]): void;
}

/**
 * MQTT.js handles one packet after the other and sends a PUBACK as soon as the
 * handler calls back, so that a handler which waits for a commit lets through one
 * message a commit. Here the handler calls back at once and the PUBACK waits apart,
 * by message id, until it is released. One of an earlier connection is dropped:
 * the broker sends that message again.
 */
export const deferPubacks = (
  client: MqttClient,
  receive: (packet: IPublishPacket, release: () => void) => void,
): void => {
  const sender = client as unknown as Sender;
  const send = sender._sendPacket.bind(client);
  const held = new Map<number, Packet>();
  /** Released before the library asked for the PUBACK, within the handler itself. */
  const released = new Set<number>();
  let connection = 0;
  client.on('connect', () => {
    connection++;
    held.clear();
    released.clear();
  });
  sender._sendPacket = (packet, done, ...rest) => {
    const id = packet.cmd === 'puback' ? packet.messageId : undefined;
    if (id === undefined || released.delete(id)) return send(packet, done, ...rest);
    held.set(id, packet);
    done?.();
  };
  client.handleMessage = (packet, done) => {
    const [id, from] = [packet.messageId, connection];
    receive(packet, () => {
      if (id === undefined || from !== connection || !client.connected) return;
      const puback = held.get(id);
      held.delete(id);
      if (puback) send(puback);
      else released.add(id);
    });
    done();
  };
};
