import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { encodeFrame, FrameDecoder } from "../../lib/report/zmtp_frame.ts";

describe("frames", () => {
  test("are laid out as in RFC 23/ZMTP: flags, length, body", () => {
    // ZeroMQ RFC 23/ZMTP, "Framing": bit 0 more, bit 1 long, bit 2 command; 1 or 8 bytes of length.
    const short = encodeFrame({ more: true, command: false, body: new Uint8Array([7, 8]) });
    expect([...short]).toEqual([0x01, 2, 7, 8]);
    const command = encodeFrame({ more: false, command: true, body: new Uint8Array([9]) });
    expect([...command]).toEqual([0x04, 1, 9]);
    const long = encodeFrame({ more: false, command: false, body: new Uint8Array(256) });
    expect([...long.slice(0, 9)]).toEqual([0x02, 0, 0, 0, 0, 0, 0, 1, 0]);
    expect(encodeFrame({ more: false, command: false, body: new Uint8Array(255) })[0]).toBe(0);
  });

  test("survive any cutting of the stream", () => {
    const frame = fc.record({
      more: fc.boolean(),
      command: fc.boolean(),
      body: fc.oneof(
        fc.uint8Array({ maxLength: 20 }),
        fc.integer({ min: 250, max: 700 }).map((n) => new Uint8Array(n).fill(n % 251)),
      ),
    });
    fc.assert(fc.property(
      fc.array(frame, { maxLength: 8 }),
      fc.array(fc.integer({ min: 1, max: 300 }), { minLength: 1, maxLength: 40 }),
      (frames, cuts) => {
        const bytes = new Uint8Array(frames.flatMap((f) => [...encodeFrame(f)]));
        const decoder = new FrameDecoder();
        const found = [];
        for (let at = 0, i = 0; at < bytes.length; i++) {
          const size = cuts[i % cuts.length];
          found.push(...decoder.push(bytes.slice(at, at + size)));
          at += size;
        }
        expect(found.map((f) => ({ ...f, body: [...f.body] })))
          .toEqual(frames.map((f) => ({ ...f, body: [...f.body] })));
      },
    ));
  });

  test("of another protocol are refused", () => {
    expect(() => new FrameDecoder().push(new TextEncoder().encode("HTTP/1.1"))).toThrow(
      /flags 0x48/,
    );
    const huge = new Uint8Array([2, 0xff, 0, 0, 0, 0, 0, 0, 0]);
    expect(() => new FrameDecoder().push(huge)).toThrow(/bytes/);
  });
});
