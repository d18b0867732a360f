import { createServer } from 'node:http';
import type { AddressInfo } from 'node:net';

const page = `<!doctype html>
<html lang="en"><head><title>One sentence</title><link rel="icon" href="data:," /></head>
<body><main><p elementtiming="verdict">One sentence, without style, script or font.</p></main></body></html>`;

/** A page that has next to nothing to load, lay out and paint: no page of the product can be seen sooner on this machine. */
export async function serveOneSentence(): Promise<{ url: string; close: () => void }> {
  const server = createServer((_request, response) => {
    response.setHeader('Content-Type', 'text/html; charset=utf-8').end(page);
  });
  await new Promise<void>((listening) => server.listen(0, '127.0.0.1', listening));
  // A server on a TCP port has such an address.
  const { port } = server.address() as AddressInfo;
  return { url: `http://127.0.0.1:${port}`, close: () => server.close() };
}
