import { connect, createServer, type Server, type Socket } from 'node:net';

/** A TCP proxy on loopback whose connections specs can cut. */
export class TcpProxy {
  readonly #pairs = new Set<{ near: Socket; far: Socket }>();
  #server: Server | null = null;
  /** Sees every chunk on its way in; returning true cuts the connection once the chunk has been passed on. */
  cutAfter: (chunk: Buffer) => boolean = () => false;
  cuts = 0;

  constructor(private readonly target: () => number) {}

  async start(): Promise<number> {
    const server = createServer((near) => {
      const far = connect(this.target(), '127.0.0.1');
      const pair = { near, far };
      this.#pairs.add(pair);
      const end = () => {
        near.destroy();
        far.destroy();
        this.#pairs.delete(pair);
      };
      for (const socket of [near, far]) socket.on('error', end).on('close', end);
      far.on('data', (chunk) => near.write(chunk));
      near.on('data', (chunk) => {
        if (!this.cutAfter(chunk)) return void far.write(chunk);
        this.cuts++;
        near.destroy();
        // What was sent still arrives; the answer finds nobody.
        far.end(chunk);
      });
    });
    this.#server = server;
    await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
    return (server.address() as { port: number }).port;
  }

  cutAll(): void {
    for (const { near, far } of [...this.#pairs]) {
      this.cuts++;
      near.destroy();
      far.destroy();
    }
  }

  async stop(): Promise<void> {
    this.cutAll();
    await new Promise<void>((resolve) => (this.#server ? this.#server.close(() => resolve()) : resolve()));
  }
}
