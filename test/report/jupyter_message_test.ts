import { describe, expect, test } from "vitest";
import { MessageSigner, request } from "../../lib/report/jupyter_message.ts";

const bytes = (text: string) => new TextEncoder().encode(text);

describe("signatures", () => {
  // RFC 4231, 4.2, 4.3 and 4.5 (test cases 1, 2, 4): those whose key is text, as keys of kernels are.
  test.each([
    [
      "1",
      "\x0b".repeat(20),
      bytes("Hi There"),
      "b0344c61d8db38535ca8afceaf0bf12b881dc200c9833da726e9376c2e32cff7",
    ],
    [
      "2",
      "Jefe",
      bytes("what do ya want for nothing?"),
      "5bdcc146bf60754e6a042426089575c75a003f089d2739839dec58b964ec3843",
    ],
    [
      "4",
      String.fromCharCode(...Array.from({ length: 25 }, (_, i) => i + 1)),
      new Uint8Array(50).fill(0xcd),
      "82558a389a443c0ea4cc819899f2083a85f0faa3e578f8077a2e3ff46729665b",
    ],
  ])("are HMAC-SHA256: test case %s of RFC 4231", async (_, key, data, digest) => {
    const signer = await MessageSigner.create(key);
    expect(await signer.sign([data])).toBe(digest);
    expect(await signer.sign([data.slice(0, 3), data.slice(3, 3), data.slice(3)])).toBe(digest);
  });

  test("of another key are not trusted", async () => {
    const wire = await (await MessageSigner.create("a")).encode(request("x", {}, "s"));
    await expect((await MessageSigner.create("b")).decode(wire)).rejects.toThrow(/signature/);
  });
});

describe("messages", () => {
  test("come back as they were, whatever stands before the delimiter", async () => {
    const signer = await MessageSigner.create("key");
    const message = request("execute_request", { code: "1 + 1 // µ" }, "session");
    const wire = await signer.encode(message);
    expect(await signer.decode(wire)).toEqual(message);
    expect(await signer.decode([bytes("topic"), ...wire])).toEqual(message);
  });

  test("that were cut are refused", async () => {
    const signer = await MessageSigner.create("key");
    const wire = await signer.encode(request("x", {}, "s"));
    await expect(signer.decode(wire.slice(0, 4))).rejects.toThrow(/of 4 parts/);
    await expect(signer.decode([bytes("nothing")])).rejects.toThrow(/of 1 parts/);
  });
});
