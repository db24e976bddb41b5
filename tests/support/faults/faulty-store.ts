import { once } from "node:events";
import { connect, createServer, type AddressInfo, type Server, type Socket } from "node:net";

/** A way to the test's file store that can be cut, or stand still in the middle of an answer. */
export type FaultyStore = {
  /** What a process takes for the file store's address. */
  url: string;
  /** Lets so many bytes of answers through from now on, and then no more. */
  stallAfter: (bytes: number) => void;
  isStalling: () => boolean;
  /** Nobody answers at the address. */
  goDown: () => Promise<void>;
  /** All is well again. */
  recover: () => Promise<void>;
  close: () => Promise<void>;
};

export async function startFaultyStore(storeUrl: string): Promise<FaultyStore> {
  const { hostname, port } = new URL(storeUrl);
  const sockets = new Set<Socket>();
  const held = new Set<Socket>();
  let bytesLeft = Infinity;
  const pass = (client: Socket) => {
    const store = connect({ host: hostname, port: Number(port) });
    for (const socket of [client, store]) {
      sockets.add(socket);
      socket.on("error", () => undefined).on("close", () => {
        sockets.delete(socket);
        client.destroy();
        store.destroy();
      });
    }
    client.pipe(store);
    store.on("data", (chunk: Buffer) => {
      client.write(chunk);
      bytesLeft -= chunk.length;
      if (bytesLeft > 0) return;
      store.pause();
      held.add(store);
    });
  };
  let server = await listen(pass, 0);
  const ownPort = (server.address() as AddressInfo).port;
  const goDown = async () => {
    for (const socket of sockets) socket.destroy();
    if (server.listening) await new Promise((resolve) => server.close(resolve));
  };
  return {
    url: `http://127.0.0.1:${ownPort}`,
    stallAfter: (bytes) => { bytesLeft = bytes; },
    isStalling: () => held.size > 0,
    goDown,
    async recover() {
      bytesLeft = Infinity;
      for (const store of held) store.resume();
      held.clear();
      if (!server.listening) server = await listen(pass, ownPort);
    },
    close: goDown,
  };
}

async function listen(pass: (client: Socket) => void, port: number): Promise<Server> {
  const server = createServer(pass).listen(port, "127.0.0.1");
  await once(server, "listening");
  return server;
}
