import { Transform, type TransformCallback } from 'node:stream';

/**
 * Passes MQTT bytes through and fails once a packet announces more than `largest` bytes (fixed header, MQTT 3.1.1 §2.2.3: the
 * broker itself would collect it in memory first).
 */
export class PacketSizeGuard extends Transform {
  /** Bytes of the current packet's body still to come. */
  #left = 0;
  #inHeader = false;
  #length = 0;
  #shift = 0;

  constructor(private readonly largest: number) {
    super();
  }

  override _transform(chunk: Buffer, _encoding: BufferEncoding, done: TransformCallback): void {
    let at = 0;
    while (at < chunk.length) {
      if (this.#left > 0) {
        const take = Math.min(this.#left, chunk.length - at);
        this.#left -= take;
        at += take;
      } else if (!this.#inHeader) {
        // First byte: packet type and flags.
        [this.#inHeader, this.#length, this.#shift] = [true, 0, 0];
        at++;
      } else {
        const byte = chunk[at++] ?? 0;
        this.#length += (byte & 0x7f) << this.#shift;
        this.#shift += 7;
        if ((byte & 0x80) === 0) [this.#inHeader, this.#left] = [false, this.#length];
        if (this.#length > this.largest || this.#shift > 28) {
          return done(new Error(`packet of more than ${this.largest} bytes`));
        }
      }
    }
    done(null, chunk);
  }
}
