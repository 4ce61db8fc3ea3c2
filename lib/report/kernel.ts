import { dirname } from "node:path";
import { type ConnectionFile, writeConnectionFile } from "./connection_file.ts";
import { deadline } from "./deadline.ts";
import { type JupyterMessage, MessageSigner, request } from "./jupyter_message.ts";
import { ZmtpSocket, type ZmtpSocketType } from "./zmtp_socket.ts";

/** A kernel that could not be started, or that ended by itself. */
export class KernelError extends Error {
  /** An error with its message.
   *
   * @param message what happened and what to do */
  constructor(message: string) {
    super(message);
    this.name = "KernelError";
  }
}

/** What was sent to a kernel and came back. */
export interface Exchange {
  /** Id of the request. */
  readonly id: string;
  /** The reply, or `undefined` if the kernel failed. */
  readonly reply: Promise<JupyterMessage | undefined>;
}

/** Longest time for a kernel to start, s. */
const START_TIMEOUT = 60;
/** Longest time for it to end when asked to, ms. */
const END_TIMEOUT = 2_000;
/** Longest time that the end of a process may be told later than that of its connections, ms. */
const LATE = 500;

/** A running Deno kernel: a process of our own, reached over loopback. */
export class Kernel {
  readonly #process: Deno.ChildProcess;
  readonly #signer: MessageSigner;
  readonly #connection: ConnectionFile;
  readonly #session = crypto.randomUUID();
  readonly #waiting = new Map<string, (reply: JupyterMessage | undefined) => void>();
  readonly #sockets: ZmtpSocket[] = [];
  readonly #ended: Promise<void>;
  #fail!: (why: string) => void;
  #shell?: ZmtpSocket;
  #control?: ZmtpSocket;
  #listener: (message: JupyterMessage) => void = () => {};
  #hasEnded = false;
  #closing = false;
  #stderr = "";
  /** Settles, with what happened, when the process ends or can no longer be talked to. */
  readonly failed: Promise<string>;

  private constructor(
    process: Deno.ChildProcess,
    signer: MessageSigner,
    connection: ConnectionFile,
  ) {
    this.#process = process;
    this.#signer = signer;
    this.#connection = connection;
    this.failed = new Promise((resolve) => {
      this.#fail = (why) => {
        resolve(why);
        for (const settle of this.#waiting.values()) settle(undefined);
        this.#waiting.clear();
      };
    });
    const words = this.#collectStderr();
    this.#ended = process.status.then(async ({ code, signal }) => {
      this.#hasEnded = true;
      await Promise.race([words, delay(LATE)]);
      this.#fail(`it ended by itself (${signal ?? `exit code ${code}`})`);
    });
  }

  /** Starts a kernel in a folder and waits until it answers and its outputs arrive.
   *
   * @param cwd folder of the notebook @param signal gives up
   * @throws {KernelError} if it does not start @throws {DOMException} if the signal aborts */
  static async start(cwd: string, signal?: AbortSignal): Promise<Kernel> {
    const connection = await writeConnectionFile();
    let process: Deno.ChildProcess;
    try {
      process = new Deno.Command(Deno.execPath(), {
        args: ["jupyter", "--kernel", "--conn", connection.path],
        cwd,
        stdin: "null",
        stdout: "null",
        stderr: "piped",
      }).spawn();
    } catch (error) {
      await connection.remove();
      throw error;
    }
    const kernel = new Kernel(process, await MessageSigner.create(connection.key), connection);
    const limit = deadline(START_TIMEOUT, signal);
    try {
      const why = await Promise.race([
        kernel.#connect().then(() => undefined),
        kernel.failed,
        limit.reached,
      ]);
      if (why === undefined) return kernel;
      if (why === "aborted") signal!.throwIfAborted();
      const told = why === "timeout" ? `it did not answer within ${START_TIMEOUT} s` : why;
      throw new KernelError(
        `Cannot start the Deno kernel: ${told}\n${kernel.standardError}`.trim(),
      );
    } catch (error) {
      await kernel.shutdown();
      throw error;
    } finally {
      limit.clear();
    }
  }

  /** What the process wrote on standard error. */
  get standardError(): string {
    return this.#stderr.split("\n").filter((line) => !line.includes('"deno jupyter" is unstable'))
      .join("\n").trim();
  }

  /** Sets who gets the messages that the kernel broadcasts, and its requests for input. */
  listen(listener: (message: JupyterMessage) => void): void {
    this.#listener = listener;
  }

  /** Sends code to be executed. */
  execute(
    code: string,
    options: { storeHistory: boolean; silent?: boolean },
  ): Promise<Exchange> {
    return this.#ask("execute_request", {
      code,
      silent: options.silent ?? false,
      store_history: options.storeHistory,
      user_expressions: {},
      // Allowed, so that a request for input is seen and can be refused; else the code would go on with null.
      allow_stdin: true,
      stop_on_error: true,
    });
  }

  /** Ends the kernel: asks first, then ends its process; leaves nothing behind. */
  async shutdown(): Promise<void> {
    this.#closing = true;
    if (!this.#hasEnded && this.#control) {
      const ask = request("shutdown_request", { restart: false }, this.#session);
      await this.#signer.encode(ask).then((wire) => this.#control!.send(wire)).catch(() => {});
      await Promise.race([this.#ended, delay(END_TIMEOUT)]);
    }
    if (!this.#hasEnded) {
      try {
        this.#process.kill("SIGKILL");
      } catch {
        // Ended in the meantime.
      }
    }
    await this.#ended;
    for (const socket of this.#sockets) socket.close();
    await this.#connection.remove();
  }

  async #connect(): Promise<void> {
    const { ports } = this.#connection;
    // The kernel sends a request for input to the peer that has the identity of the one that asked for the cell.
    const identity = this.#session;
    this.#shell = await this.#reach(ports.shell_port, "DEALER", identity);
    const stdin = await this.#reach(ports.stdin_port, "DEALER", identity);
    this.#control = await this.#reach(ports.control_port, "DEALER");
    const iopub = await this.#reach(ports.iopub_port, "SUB");
    this.#pump(this.#shell, (message) => this.#settle(message));
    this.#pump(this.#control, () => {});
    this.#pump(stdin, (message) => this.#listener(message));
    this.#pump(iopub, (message) => this.#listener(message));
    // A subscription takes effect some time after it is sent: ask until a broadcast arrives.
    const heard = new Promise<void>((resolve) => this.listen(() => resolve()));
    for (let got = false; !got && !this.#closing;) {
      await (await this.#ask("kernel_info_request", {})).reply;
      got = await Promise.race([heard.then(() => true), delay(50).then(() => false)]);
    }
    const watch = watchCode(this.#connection.path);
    await (await this.execute(watch, { storeHistory: false, silent: true })).reply;
  }

  async #reach(port: number, type: ZmtpSocketType, identity?: string): Promise<ZmtpSocket> {
    for (;;) {
      try {
        const socket = await ZmtpSocket.connect(port, type, identity);
        this.#sockets.push(socket);
        if (this.#closing) socket.close();
        return socket;
      } catch (error) {
        if (!(error instanceof Deno.errors.ConnectionRefused) || this.#closing) throw error;
        await delay(20);
      }
    }
  }

  async #ask(type: string, content: Readonly<Record<string, unknown>>): Promise<Exchange> {
    const message = request(type, content, this.#session);
    const id = message.header.msg_id;
    const reply = new Promise<JupyterMessage | undefined>((resolve) => {
      this.#waiting.set(id, resolve);
      this.failed.then(() => resolve(undefined));
    });
    await this.#shell!.send(await this.#signer.encode(message)).catch((error) =>
      this.#fail(`a message could not be sent to it (${error.message})`)
    );
    return { id, reply };
  }

  #settle(message: JupyterMessage): void {
    const id = message.parent_header.msg_id ?? "";
    this.#waiting.get(id)?.(message);
    this.#waiting.delete(id);
  }

  /** Reads a connection to its end. Whatever goes wrong is told as a failure of the kernel, never thrown:
   * nobody waits for this work. */
  async #pump(socket: ZmtpSocket, take: (message: JupyterMessage) => void): Promise<void> {
    try {
      for (;;) {
        const wire = await socket.receive();
        if (!wire) break;
        take(await this.#signer.decode(wire));
      }
      await Promise.race([this.#ended, delay(LATE)]);
      this.#fail("it closed a connection");
    } catch (error) {
      this.#fail(error instanceof Error ? error.message : String(error));
    }
  }

  async #collectStderr(): Promise<void> {
    const decoder = new TextDecoderStream();
    for await (const text of this.#process.stderr.pipeThrough(decoder as never)) {
      this.#stderr = (this.#stderr + text).slice(-4000);
    }
  }
}

/** Code by which a kernel ends itself, and removes its connection file, when the process that started it is
 * gone without a word (killed, or a terminal closed); it would live on for ever otherwise. */
function watchCode(connectionFile: string): string {
  return `Deno.unrefTimer(setInterval(() => {
    if (Deno.ppid === ${Deno.pid}) return;
    try {
      Deno.removeSync(${JSON.stringify(dirname(connectionFile))}, { recursive: true });
    } finally {
      Deno.exit(1);
    }
  }, 500));`;
}

function delay(ms: number): Promise<void> {
  return new Promise((resolve) => {
    const timer = setTimeout(resolve, ms);
    Deno.unrefTimer(timer);
  });
}
