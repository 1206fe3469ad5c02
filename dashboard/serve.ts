import { createServer } from 'node:http';
import { createApp } from './app.js';
import type { DashboardDeps } from './deps.js';

export interface Served {
  /** e.g. "http://127.0.0.1:8137" */
  readonly address: string;
  close(): Promise<void>;
}

/** Serves the dashboard to this machine; port 0 takes a free one. Another address than this machine's own is for
 *  containers, which publish it themselves.
 *  @throws the system's error if the port is taken */
export async function serve(deps: DashboardDeps, port: number, bind = '127.0.0.1'): Promise<Served> {
  const app = createApp(deps);
  const server = createServer({ maxHeaderSize: 16_384, requestTimeout: 30_000 }, app);
  await new Promise<void>((resolve, reject) => {
    server.once('error', reject);
    server.listen(port, bind, resolve);
  });
  const found = server.address();
  const actual = found !== null && typeof found === 'object' ? found.port : port;
  return {
    address: `http://${bind === '0.0.0.0' ? '127.0.0.1' : bind}:${actual}`,
    close: () =>
      new Promise((resolve) => {
        app.live.close();
        server.close(() => resolve());
        server.closeAllConnections();
      }),
  };
}
