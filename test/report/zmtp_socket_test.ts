import { afterEach, describe, expect, test } from "vitest";
import { encodeFrame } from "../../lib/report/zmtp_frame.ts";
import { ZmtpSocket } from "../../lib/report/zmtp_socket.ts";

const text = (value: string) => new TextEncoder().encode(value);

/** RFC 23/ZMTP, "Greeting": signature %xFF 8OCTET %x7F, version 3 0, mechanism 20 octets, as-server, filler. */
function greeting(mechanism = "NULL"): Uint8Array {
  const bytes = new Uint8Array(64);
  bytes.set([0xff, 0, 0, 0, 0, 0, 0, 0, 1, 0x7f, 3, 0]);
  bytes.set(text(mechanism), 12);
  return bytes;
}

const READY = encodeFrame({
  more: false,
  command: true,
  body: new Uint8Array([
    5,
    ...text("READY"),
    11,
    ...text("Socket-Type"),
    0,
    0,
    0,
    3,
    ...text("PUB"),
  ]),
});

let listener: Deno.TcpListener | undefined;
let accepted: Deno.TcpConn | undefined;
afterEach(() => {
  try {
    accepted?.close();
  } catch {
    // Closed by the test.
  }
  listener?.close();
  listener = accepted = undefined;
});

/** A peer that writes these pieces one after another, reads all that comes, and hangs up if told to. */
function peer(pieces: readonly Uint8Array[], hangUp = false): { port: number; heard: number[] } {
  listener = Deno.listen({ hostname: "127.0.0.1", port: 0 });
  const heard: number[] = [];
  listener.accept().then(async (connection) => {
    accepted = connection;
    connection.setNoDelay(true);
    const reading = (async () => {
      const buffer = new Uint8Array(4096);
      for (let n; (n = await connection.read(buffer)) !== null;) heard.push(...buffer.slice(0, n));
    })().catch(() => {});
    for (const piece of pieces) {
      await connection.write(piece);
      await new Promise((resolve) => setTimeout(resolve, 2));
    }
    if (hangUp) connection.close();
    await reading;
  });
  return { port: (listener.addr as Deno.NetAddr).port, heard };
}

function cut(bytes: Uint8Array, size: number): Uint8Array[] {
  return Array.from(
    { length: Math.ceil(bytes.length / size) },
    (_, i) => bytes.slice(i * size, (i + 1) * size),
  );
}

describe("a connection", () => {
  test("shakes hands and receives messages however the stream is cut", async () => {
    const long = new Uint8Array(700).fill(7);
    const message = [
      encodeFrame({ more: true, command: false, body: text("topic") }),
      encodeFrame({ more: false, command: true, body: new Uint8Array([4, ...text("PING")]) }),
      encodeFrame({ more: false, command: false, body: long }),
    ];
    const stream = new Uint8Array([greeting(), READY, ...message].flatMap((part) => [...part]));
    const { port } = peer(cut(stream, 37));
    const socket = await ZmtpSocket.connect(port, "SUB");
    expect((await socket.receive())?.map((part) => part.length)).toEqual([5, 700]);
    socket.close();
    socket.close();
  });

  test("says what it is, which name it has, and what it subscribes to", async () => {
    const { port, heard } = peer([greeting(), READY], false);
    const socket = await ZmtpSocket.connect(port, "SUB", "me");
    await new Promise((resolve) => setTimeout(resolve, 20));
    expect(heard.slice(0, 12)).toEqual([0xff, 0, 0, 0, 0, 0, 0, 0, 0, 0x7f, 3, 0]);
    // RFC 23/ZMTP: command frame; property = name-length name 4-octet value-length value; subscribe = %x1 prefix.
    const property = (name: string, value: string) => [
      ...[name.length, ...text(name)],
      ...[0, 0, 0, value.length, ...text(value)],
    ];
    const body = [
      5,
      ...text("READY"),
      ...property("Socket-Type", "SUB"),
      ...property("Identity", "me"),
    ];
    expect(heard.slice(64)).toEqual([4, body.length, ...body, 0, 1, 1]);
    socket.close();
  });

  test("that the other side ends gives no further message", async () => {
    const { port } = peer([greeting(), READY], true);
    const socket = await ZmtpSocket.connect(port, "DEALER");
    expect(await socket.receive()).toBeUndefined();
    socket.close();
  });

  test("that this side ends gives no further message", async () => {
    const { port } = peer([greeting(), READY]);
    const socket = await ZmtpSocket.connect(port, "DEALER");
    const waiting = socket.receive();
    socket.close();
    expect(await waiting).toBeUndefined();
  });
});

describe("a peer is refused", () => {
  test.each([
    [
      "that speaks something else",
      [text("HTTP/1.1 400 Bad Request\r\n".padEnd(64))],
      /not that of ZMTP 3/,
    ],
    ["that wants encryption", [greeting("CURVE")], /wants the mechanism CURVE/],
    ["that answers an error", [
      greeting(),
      encodeFrame({ more: false, command: true, body: new Uint8Array([5, ...text("ERROR"), 0]) }),
    ], /answered ERROR/],
  ])("%s", async (_, pieces, message) => {
    const { port } = peer(pieces);
    await expect(ZmtpSocket.connect(port, "DEALER")).rejects.toThrow(message);
  });

  test("that hangs up", async () => {
    const { port } = peer([greeting().slice(0, 10)], true);
    await expect(ZmtpSocket.connect(port, "DEALER")).rejects.toThrow(/ended after 10 bytes/);
  });
});
