/** Frames of ZMTP 3.0, the wire protocol of ZeroMQ.
 *
 * Source: P. Hintjens, ZeroMQ RFC 23/ZMTP (2013), "Framing". */

/** One frame: a part of a message, or a command of the protocol. */
export interface ZmtpFrame {
  /** Whether more parts of the same message follow. */
  readonly more: boolean;
  /** Whether it is a command and not part of a message. */
  readonly command: boolean;
  /** Its bytes. */
  readonly body: Uint8Array;
}

const MORE = 0x01;
const LONG = 0x02;
const COMMAND = 0x04;

/** A frame as bytes: flags, length in 1 byte or in 8, body. */
export function encodeFrame(frame: ZmtpFrame): Uint8Array<ArrayBuffer> {
  const { body } = frame;
  const long = body.length > 255;
  const head = long ? 9 : 2;
  const bytes = new Uint8Array(head + body.length);
  bytes[0] = (frame.more ? MORE : 0) | (long ? LONG : 0) | (frame.command ? COMMAND : 0);
  if (long) new DataView(bytes.buffer).setBigUint64(1, BigInt(body.length));
  else bytes[1] = body.length;
  bytes.set(body, head);
  return bytes;
}

/** Takes frames out of a stream of bytes that arrives in pieces of any size. */
export class FrameDecoder {
  #pieces: Uint8Array[] = [];
  #length = 0;

  /** Adds a piece and gives back every frame that is complete.
   *
   * @throws {RangeError} on a reserved flag or a length that no message has: the peer speaks something else */
  push(piece: Uint8Array): ZmtpFrame[] {
    this.#pieces.push(piece);
    this.#length += piece.length;
    const frames: ZmtpFrame[] = [];
    for (;;) {
      const head = this.#peek(9);
      if (head.length < 2) return frames;
      const flags = head[0];
      if (flags > 7) {
        throw new RangeError(`Cannot read a ZMTP frame with flags 0x${flags.toString(16)}`);
      }
      const long = (flags & LONG) !== 0;
      if (long && head.length < 9) return frames;
      const size = long
        ? new DataView(head.buffer, head.byteOffset).getBigUint64(1)
        : BigInt(head[1]);
      if (size > MOST) throw new RangeError(`Cannot read a ZMTP frame of ${size} bytes`);
      const whole = (long ? 9 : 2) + Number(size);
      if (this.#length < whole) return frames;
      frames.push({
        more: (flags & MORE) !== 0,
        command: (flags & COMMAND) !== 0,
        body: this.#take(whole).subarray(long ? 9 : 2),
      });
    }
  }

  /** The first bytes without taking them. */
  #peek(count: number): Uint8Array {
    if (this.#pieces.length > 1 && this.#pieces[0].length < count) this.#join();
    return (this.#pieces[0] ?? new Uint8Array()).subarray(0, count);
  }

  #take(count: number): Uint8Array {
    if (this.#pieces[0].length < count) this.#join();
    const [first] = this.#pieces;
    const taken = first.subarray(0, count);
    if (first.length === count) this.#pieces.shift();
    else this.#pieces[0] = first.subarray(count);
    this.#length -= count;
    return taken;
  }

  #join(): void {
    const all = new Uint8Array(this.#length);
    let at = 0;
    for (const piece of this.#pieces) {
      all.set(piece, at);
      at += piece.length;
    }
    this.#pieces = [all];
  }
}

/** More bytes than any message has. */
const MOST = 2n ** 31n;
