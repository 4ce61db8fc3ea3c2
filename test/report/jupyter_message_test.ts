import { describe, expect, test } from "vitest";
import { MessageSigner, request } from "../../lib/report/jupyter_message.ts";

const bytes = (text: string) => new TextEncoder().encode(text);

describe("signatures", () => {
  test("are HMAC-SHA256: test case 2 of RFC 4231", async () => {
    // RFC 4231, 4.3: key "Jefe", data "what do ya want for nothing?".
    const signer = await MessageSigner.create("Jefe");
    const parts = ["what do ya ", "want ", "for ", "nothing?"].map(bytes);
    expect(await signer.sign(parts)).toBe(
      "5bdcc146bf60754e6a042426089575c75a003f089d2739839dec58b964ec3843",
    );
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
