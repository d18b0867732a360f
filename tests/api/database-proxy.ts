import { connect, createServer, type AddressInfo, type Socket } from 'node:net';

export type DatabaseProxy = {
  /** Address of the database through the proxy. */
  url: string;
  /** Breaks every connection and refuses new ones, as a network does that fails. */
  cut: () => void;
  restore: () => void;
  /** Takes new connections at once but passes nothing on for so many milliseconds, as a machine does that is busy. */
  delay: (ms: number) => void;
  close: () => Promise<void>;
};

/** A line between a pool and PostgreSQL that a test can cut and join again. */
export async function openDatabaseProxy(databaseUrl: string): Promise<DatabaseProxy> {
  const target = new URL(databaseUrl);
  const sockets = new Set<Socket>();
  let isCut = false;
  let delayMs = 0;
  const server = createServer((near) => {
    if (isCut) {
      near.resetAndDestroy();
      return;
    }
    const far = connect(Number(target.port), target.hostname);
    for (const [socket, other] of [
      [near, far],
      [far, near],
    ] as const) {
      sockets.add(socket);
      socket.on('error', () => other.destroy());
      socket.on('close', () => {
        sockets.delete(socket);
        other.destroy();
      });
      setTimeout(() => socket.pipe(other), delayMs);
    }
  });
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  const url = new URL(databaseUrl);
  url.hostname = '127.0.0.1';
  // A server that listens on a port has an AddressInfo.
  url.port = String((server.address() as AddressInfo).port);
  return {
    url: url.href,
    cut: () => {
      isCut = true;
      for (const socket of sockets) socket.resetAndDestroy();
    },
    restore: () => {
      isCut = false;
    },
    delay: (ms) => {
      delayMs = ms;
    },
    close: async () => {
      for (const socket of sockets) socket.destroy();
      await new Promise((resolve) => server.close(resolve));
    },
  };
}
