import { encodeFrame, FrameDecoder, type ZmtpFrame } from "./zmtp_frame.ts";

/** Longest silence of a peer while hands are shaken, ms. */
const HANDSHAKE_TIMEOUT = 10_000;

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
   * @param port where @param type what this end is @param identity name under which the peer files this end
   * @throws {Deno.errors.ConnectionRefused} if nobody listens
   * @throws {RangeError} if the peer does not speak ZMTP 3, or says nothing for 10 s */
  static async connect(
    port: number,
    type: ZmtpSocketType,
    identity?: string,
  ): Promise<ZmtpSocket> {
    const connection = await Deno.connect({ hostname: "127.0.0.1", port });
    connection.setNoDelay(true);
    const socket = new ZmtpSocket(connection);
    const silence = setTimeout(() => socket.close(), HANDSHAKE_TIMEOUT);
    try {
      await socket.#shakeHands(type, identity);
      if (type === "SUB") {
        await socket.#write([{ more: false, command: false, body: SUBSCRIBE_ALL }]);
      }
    } catch (error) {
      socket.close();
      throw error;
    } finally {
      clearTimeout(silence);
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

  async #shakeHands(type: ZmtpSocketType, identity: string | undefined): Promise<void> {
    await writeAll(this.#connection, greeting());
    const theirs = await this.#readGreeting();
    if (theirs[0] !== 0xff || theirs[9] !== 0x7f || theirs[10] < 3) {
      throw new RangeError(`Cannot talk to the peer: its greeting is not that of ZMTP 3`);
    }
    const mechanism = new TextDecoder().decode(theirs.subarray(12, 32)).replace(/\0+$/, "");
    if (mechanism !== "NULL") {
      throw new RangeError(
        `Cannot talk to the peer: it wants the mechanism ${mechanism}, not NULL`,
      );
    }
    const ready = readyCommand(type, identity);
    await this.#write([{ more: false, command: true, body: ready }]);
    const answer = await this.#nextFrame();
    const name = answer && new TextDecoder().decode(answer.body.subarray(1, 1 + answer.body[0]));
    if (!answer?.command || name !== "READY") {
      throw new RangeError(`Cannot talk to the peer: it answered ${name ?? "nothing"}, not READY`);
    }
  }

  async #nextFrame(): Promise<ZmtpFrame | undefined> {
    const buffer = new Uint8Array(65536);
    while (this.#ready.length === 0) {
      const count = await this.#read(buffer);
      if (count === null) return undefined;
      this.#ready.push(...this.#decoder.push(buffer.slice(0, count)));
    }
    return this.#ready.shift();
  }

  /** Reads what is there; `null` at the end, whichever side made it. */
  async #read(buffer: Uint8Array): Promise<number | null> {
    try {
      return await this.#connection.read(buffer);
    } catch (error) {
      const { BadResource, Interrupted, ConnectionReset } = Deno.errors;
      if ([BadResource, Interrupted, ConnectionReset].some((kind) => error instanceof kind)) {
        return null;
      }
      throw error;
    }
  }

  async #readGreeting(): Promise<Uint8Array> {
    const bytes = new Uint8Array(64);
    for (let at = 0; at < bytes.length;) {
      const count = await this.#read(bytes.subarray(at));
      if (count === null) {
        throw new RangeError(`Cannot talk to the peer: its greeting ended after ${at} bytes`);
      }
      at += count;
    }
    return bytes;
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

/** READY with the property Socket-Type and, where there is one, Identity. */
function readyCommand(type: ZmtpSocketType, identity: string | undefined): Uint8Array {
  const properties = [["Socket-Type", type], ...(identity ? [["Identity", identity]] : [])];
  const text = (value: string) => new TextEncoder().encode(value);
  const bytes = [5, ...text("READY")];
  for (const [name, value] of properties) {
    const length = new Uint8Array(4);
    new DataView(length.buffer).setUint32(0, text(value).length);
    bytes.push(name.length, ...text(name), ...length, ...text(value));
  }
  return Uint8Array.from(bytes);
}

async function writeAll(connection: Deno.TcpConn, bytes: Uint8Array): Promise<void> {
  for (let at = 0; at < bytes.length;) at += await connection.write(bytes.subarray(at));
}
