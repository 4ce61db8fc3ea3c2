import type { Source } from "../quantity/result.ts";
import { RunFileError } from "./run_file_error.ts";

/** What can be read: a path, a file: URL, a file or blob, or text with a name. */
export type TextSource = string | URL | Blob | { readonly name: string; readonly text: string };

/** A text with the file it came from. */
export interface SourceText {
  /** The decoded text. */
  readonly text: string;
  /** Name, SHA-256 and length of the file. */
  readonly source: Source;
}

/** Reads a text source and takes the SHA-256 of its bytes.
 *
 * @throws {RunFileError} if the bytes are not text in UTF-8, or in UTF-16 with its byte-order mark */
export async function readSource(given: TextSource): Promise<SourceText> {
  const { name, bytes } = await readBytes(given);
  const digest = new Uint8Array(await crypto.subtle.digest("SHA-256", bytes));
  const sha256 = Array.from(digest, (byte) => byte.toString(16).padStart(2, "0")).join("");
  return { text: decode(bytes, name), source: { name, sha256, bytes: bytes.length } };
}

async function readBytes(
  given: TextSource,
): Promise<{ name: string; bytes: Uint8Array<ArrayBuffer> }> {
  if (typeof given === "string") {
    if (/[\r\n]/.test(given)) {
      throw new TypeError(
        `Cannot read a path of several lines, ${
          JSON.stringify(given.slice(0, 40))
        }…: write text as ` +
          `{ name: "runs.csv", text }`,
      );
    }
    return { name: given.split(/[/\\]/).at(-1)!, bytes: await Deno.readFile(given) };
  }
  if (given instanceof URL) {
    if (given.protocol !== "file:") {
      throw new TypeError(`Cannot read runs from ${given}: only files are read; save it first`);
    }
    const name = decodeURIComponent(given.pathname.split("/").at(-1)!);
    return { name, bytes: await Deno.readFile(given) };
  }
  if (given instanceof Blob) {
    const name = given instanceof File ? given.name : "data";
    return { name, bytes: new Uint8Array(await given.arrayBuffer()) };
  }
  return { name: given.name, bytes: new TextEncoder().encode(given.text) };
}

function decode(bytes: Uint8Array, file: string): string {
  const utf16 = bytes[0] === 0xff && bytes[1] === 0xfe
    ? "utf-16le"
    : bytes[0] === 0xfe && bytes[1] === 0xff
    ? "utf-16be"
    : undefined;
  let text: string;
  try {
    text = new TextDecoder(utf16 ?? "utf-8", { fatal: true }).decode(bytes);
  } catch {
    throw notUtf8(file, "the file is not UTF-8 text");
  }
  if (text.includes("\0")) {
    throw notUtf8(file, "the file holds zero bytes, so it is UTF-16 without its mark, or no text");
  }
  return text;
}

function notUtf8(file: string, why: string): RunFileError {
  return new RunFileError([{ file, message: `${why}; save it as CSV UTF-8` }]);
}
