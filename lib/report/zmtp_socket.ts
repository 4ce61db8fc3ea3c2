import { encodeFrame, FrameDecoder, type ZmtpFrame } from "./zmtp_frame.ts";

/** Socket types used towards a kernel. */
export type ZmtpSocketType = "DEALER" | "SUB";

/** A client's end of a ZMTP 3.0 connection with the NULL mechanism (no encryption; loopback only).
 *
 * Source: P. Hintjens, ZeroMQ RFC 23/ZMTP (2013). */
export class ZmtpSocket {
  readonly #connection: Deno.TcpConn;
  readonly #decoder = new FrameDecoder();
  readonly #ready: ZmtpFrame[] = [];
  #parts: Uint8Array[] = [];
  #sending: Promise<void> = Promise.resolve();

  private constructor(connection: Deno.TcpConn) {
    this.#connection = connection;
  }

  /** Connects to a port on loopback and shakes hands.
   *
   * @throws {Deno.errors.ConnectionRefused} if nobody listens
   * @throws {RangeError} if the peer does not speak ZMTP 3 */
  static async connect(port: number, type: ZmtpSocketType): Promise<ZmtpSocket> {
    const connection = await Deno.connect({ hostname: "127.0.0.1", port });
    connection.setNoDelay(true);
    const socket = new ZmtpSocket(connection);
    try {
      await socket.#shakeHands(type);
      if (type === "SUB") {
        await socket.#write([{ more: false, command: false, body: SUBSCRIBE_ALL }]);
      }
    } catch (error) {
      socket.close();
      throw error;
    }
    return socket;
  }

  /** Sends a message of several parts. */
  async send(parts: readonly Uint8Array[]): Promise<void> {
    await this.#write(
      parts.map((body, i) => ({ more: i < parts.length - 1, command: false, body })),
    );
  }

  /** The next message, or `undefined` when the connection has ended. */
  async receive(): Promise<Uint8Array[] | undefined> {
    for (;;) {
      const frame = await this.#nextFrame();
      if (!frame) return undefined;
      if (frame.command) continue;
      this.#parts.push(frame.body);
      if (frame.more) continue;
      const message = this.#parts;
      this.#parts = [];
      return message;
    }
  }

  /** Ends the connection; may be called twice. */
  close(): void {
    try {
      this.#connection.close();
    } catch {
      // Already closed.
    }
  }

  async #shakeHands(type: ZmtpSocketType): Promise<void> {
    await writeAll(this.#connection, greeting());
    const theirs = await readExactly(this.#connection, 64);
    if (theirs[0] !== 0xff || theirs[9] !== 0x7f || theirs[10] < 3) {
      throw new RangeError(`Cannot talk to the peer: its greeting is not that of ZMTP 3`);
    }
    await this.#write([{ more: false, command: true, body: readyCommand(type) }]);
    const answer = await this.#nextFrame();
    const name = answer && new TextDecoder().decode(answer.body.subarray(1, 1 + answer.body[0]));
    if (!answer?.command || name !== "READY") {
      throw new RangeError(`Cannot talk to the peer: it answered ${name ?? "nothing"}, not READY`);
    }
  }

  async #nextFrame(): Promise<ZmtpFrame | undefined> {
    const buffer = new Uint8Array(65536);
    while (this.#ready.length === 0) {
      let count: number | null;
      try {
        count = await this.#connection.read(buffer);
      } catch (error) {
        if (error instanceof Deno.errors.BadResource || error instanceof Deno.errors.Interrupted) {
          return undefined;
        }
        if (error instanceof Deno.errors.ConnectionReset) return undefined;
        throw error;
      }
      if (count === null) return undefined;
      this.#ready.push(...this.#decoder.push(buffer.slice(0, count)));
    }
    return this.#ready.shift();
  }

  /** Messages are written whole, one after the other. */
  #write(frames: readonly ZmtpFrame[]): Promise<void> {
    const next = this.#sending.then(async () => {
      for (const frame of frames) await writeAll(this.#connection, encodeFrame(frame));
    });
    this.#sending = next.catch(() => {});
    return next;
  }
}

/** The subscription to every topic: byte 1 and an empty prefix. */
const SUBSCRIBE_ALL = new Uint8Array([1]);

/** Greeting: signature, version 3.0, mechanism NULL, not a server, filler; 64 bytes. */
function greeting(): Uint8Array {
  const bytes = new Uint8Array(64);
  bytes[0] = 0xff;
  bytes[9] = 0x7f;
  bytes[10] = 3;
  bytes.set(new TextEncoder().encode("NULL"), 12);
  return bytes;
}

/** READY with the property Socket-Type. */
function readyCommand(type: ZmtpSocketType): Uint8Array {
  const text = (value: string) => new TextEncoder().encode(value);
  const key = text("Socket-Type");
  const value = text(type);
  const length = new Uint8Array(4);
  new DataView(length.buffer).setUint32(0, value.length);
  return Uint8Array.from([5, ...text("READY"), key.length, ...key, ...length, ...value]);
}

async function writeAll(connection: Deno.TcpConn, bytes: Uint8Array): Promise<void> {
  for (let at = 0; at < bytes.length;) at += await connection.write(bytes.subarray(at));
}

async function readExactly(connection: Deno.TcpConn, count: number): Promise<Uint8Array> {
  const bytes = new Uint8Array(count);
  for (let at = 0; at < count;) {
    const got = await connection.read(bytes.subarray(at));
    if (got === null) throw new RangeError(`Cannot talk to the peer: it ended after ${at} bytes`);
    at += got;
  }
  return bytes;
}
