/** Messages of the Jupyter protocol, version 5.3, on the wire.
 *
 * Source: Jupyter client documentation, "Messaging in Jupyter", protocol 5.3, "The Wire Protocol". */

/** Header of a message. */
export interface JupyterHeader {
  readonly msg_id: string;
  readonly msg_type: string;
  readonly session: string;
  readonly username: string;
  readonly date: string;
  readonly version: string;
}

/** A message. */
export interface JupyterMessage {
  readonly header: JupyterHeader;
  readonly parent_header: Partial<JupyterHeader>;
  readonly metadata: Readonly<Record<string, unknown>>;
  // The content differs by message type; its users know which they read.
  // deno-lint-ignore no-explicit-any
  readonly content: any;
}

const DELIMITER = new TextEncoder().encode("<IDS|MSG>");

/** Signs and checks messages with HMAC-SHA256 under the key of a connection file. */
export class MessageSigner {
  readonly #key: CryptoKey;

  private constructor(key: CryptoKey) {
    this.#key = key;
  }

  /** A signer for a key. */
  static async create(key: string): Promise<MessageSigner> {
    const bytes = new TextEncoder().encode(key);
    const algorithm = { name: "HMAC", hash: "SHA-256" };
    return new MessageSigner(
      await crypto.subtle.importKey("raw", bytes, algorithm, false, ["sign"]),
    );
  }

  /** Signature of the four dictionaries of a message, hexadecimal. */
  async sign(parts: readonly Uint8Array[]): Promise<string> {
    const joined = new Uint8Array(parts.reduce((sum, part) => sum + part.length, 0));
    let at = 0;
    for (const part of parts) {
      joined.set(part, at);
      at += part.length;
    }
    const digest = new Uint8Array(await crypto.subtle.sign("HMAC", this.#key, joined));
    return Array.from(digest, (byte) => byte.toString(16).padStart(2, "0")).join("");
  }

  /** A message as parts for the wire: delimiter, signature, header, parent, metadata, content. */
  async encode(message: JupyterMessage): Promise<Uint8Array[]> {
    const { header, parent_header, metadata, content } = message;
    const parts = [header, parent_header, metadata, content].map((part) =>
      new TextEncoder().encode(JSON.stringify(part))
    );
    return [DELIMITER, new TextEncoder().encode(await this.sign(parts)), ...parts];
  }

  /** A message from parts of the wire; what stands before the delimiter is left out.
   *
   * @throws {SyntaxError} if the parts are no message or the signature is wrong */
  async decode(wire: readonly Uint8Array[]): Promise<JupyterMessage> {
    const start = wire.findIndex((part) => isDelimiter(part));
    if (start < 0 || wire.length < start + 6) {
      throw new SyntaxError(`Cannot read a kernel message of ${wire.length} parts`);
    }
    const text = (i: number) => new TextDecoder().decode(wire[start + i]);
    const parts = wire.slice(start + 2, start + 6);
    if (text(1) !== await this.sign(parts)) {
      throw new SyntaxError(`Cannot trust a kernel message: its signature is wrong`);
    }
    const [header, parent_header, metadata, content] = [2, 3, 4, 5].map((i) => JSON.parse(text(i)));
    return { header, parent_header: parent_header ?? {}, metadata, content };
  }
}

/** A request ready to be sent. */
export function request(
  msg_type: string,
  content: Readonly<Record<string, unknown>>,
  session: string,
): JupyterMessage {
  return {
    header: {
      msg_id: crypto.randomUUID(),
      msg_type,
      session,
      username: "ratebook",
      date: new Date().toISOString(),
      version: "5.3",
    },
    parent_header: {},
    metadata: {},
    content,
  };
}

function isDelimiter(part: Uint8Array): boolean {
  return part.length === DELIMITER.length && part.every((byte, i) => byte === DELIMITER[i]);
}
