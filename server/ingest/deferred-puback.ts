import type { IPublishPacket, MqttClient, Packet } from 'mqtt';

/** The part of MQTT.js's client that sends a packet; not public, held to by a contract test. */
interface Sender {
  _sendPacket(packet: Packet, done?: (error?: Error) => void, ...rest: unknown[]): void;
}

/**
 * MQTT.js handles one packet after the other and sends a PUBACK as soon as the
 * handler calls back (`customHandleAcks` waits no differently), so that a handler
 * which waits for a commit lets through one message a commit. Here the handler
 * calls back at once, and the PUBACK that the library then asks for waits apart
 * until it is released. A PUBACK goes out on the connection its message came by
 * or not at all: the broker sends the message again on the next.
 */
export const deferPubacks = (
  client: MqttClient,
  receive: (packet: IPublishPacket, release: () => void) => void,
): void => {
  const sender = client as unknown as Sender;
  const send = sender._sendPacket.bind(client);
  /** Takes the PUBACK of the message at hand; the library asks for it within `done`. */
  let take: ((puback: Packet) => void) | null = null;
  sender._sendPacket = (packet, done, ...rest) => {
    if (packet.cmd !== 'puback' || take === null) return send(packet, done, ...rest);
    take(packet);
    done?.();
  };
  client.handleMessage = (message, done) => {
    const { stream } = client;
    let released = false;
    let puback: Packet | null = null;
    const sendWhenBoth = () => {
      if (!released || puback === null) return;
      const alive = client.stream === stream && client.connected && !client.disconnecting;
      if (alive) send(puback);
      puback = null;
    };
    receive(message, () => {
      released = true;
      sendWhenBoth();
    });
    take = (packet) => {
      puback = packet;
      sendWhenBoth();
    };
    done();
    take = null;
  };
};
