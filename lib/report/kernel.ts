import { type JupyterMessage, MessageSigner, request } from "./jupyter_message.ts";
import { ZmtpSocket } from "./zmtp_socket.ts";

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
  /** The reply, or `undefined` if the kernel ended. */
  readonly reply: Promise<JupyterMessage | undefined>;
}

/** Longest time for a kernel to start, ms. */
const START_TIMEOUT = 60_000;
/** Longest time for it to end when asked to, ms. */
const END_TIMEOUT = 2_000;

/** A running Deno kernel: a process of our own, reached over loopback. */
export class Kernel {
  readonly #process: Deno.ChildProcess;
  readonly #signer: MessageSigner;
  readonly #session = crypto.randomUUID();
  readonly #waiting = new Map<string, (reply: JupyterMessage | undefined) => void>();
  readonly #folder: string;
  #shell!: ZmtpSocket;
  #control!: ZmtpSocket;
  #iopub!: ZmtpSocket;
  #listener: (message: JupyterMessage) => void = () => {};
  #ended = false;
  #stderr = "";
  /** Settles when the process ends. */
  readonly ended: Promise<void>;

  private constructor(process: Deno.ChildProcess, signer: MessageSigner, folder: string) {
    this.#process = process;
    this.#signer = signer;
    this.#folder = folder;
    this.ended = process.status.then(() => {
      this.#ended = true;
      for (const settle of this.#waiting.values()) settle(undefined);
      this.#waiting.clear();
    });
    this.#collectStderr();
  }

  /** Starts a kernel in a folder and waits until it answers and its outputs arrive.
   *
   * @param cwd folder of the notebook @throws {KernelError} if it does not start */
  static async start(cwd: string): Promise<Kernel> {
    const folder = await Deno.makeTempDir({ prefix: "ratebook-kernel-" });
    const key = crypto.randomUUID();
    const [shell_port, iopub_port, stdin_port, control_port, hb_port] = freePorts(5);
    const connection = { shell_port, iopub_port, stdin_port, control_port, hb_port };
    const file = `${folder}/connection.json`;
    await Deno.writeTextFile(
      file,
      JSON.stringify({
        ...connection,
        transport: "tcp",
        ip: "127.0.0.1",
        key,
        signature_scheme: "hmac-sha256",
        kernel_name: "deno",
      }),
    );
    const process = new Deno.Command(Deno.execPath(), {
      args: ["jupyter", "--kernel", "--conn", file],
      cwd,
      stdin: "null",
      stdout: "null",
      stderr: "piped",
    }).spawn();
    const kernel = new Kernel(process, await MessageSigner.create(key), folder);
    try {
      await kernel.#connect(connection);
      return kernel;
    } catch (error) {
      await kernel.shutdown();
      throw error;
    }
  }

  /** Whether the process has ended. */
  get hasEnded(): boolean {
    return this.#ended;
  }

  /** What the process wrote on standard error. */
  get standardError(): string {
    return this.#stderr.split("\n").filter((line) => !line.includes('"deno jupyter" is unstable'))
      .join("\n").trim();
  }

  /** Sets who gets the messages that the kernel broadcasts. */
  listen(listener: (message: JupyterMessage) => void): void {
    this.#listener = listener;
  }

  /** Sends code to be executed. */
  execute(code: string, options: { storeHistory: boolean }): Promise<Exchange> {
    return this.#ask("execute_request", {
      code,
      silent: false,
      store_history: options.storeHistory,
      user_expressions: {},
      allow_stdin: false,
      stop_on_error: true,
    });
  }

  /** Ends the kernel: asks first, then ends its process; leaves nothing behind. */
  async shutdown(): Promise<void> {
    if (!this.#ended && this.#control) {
      const ask = request("shutdown_request", { restart: false }, this.#session);
      await this.#signer.encode(ask).then((wire) => this.#control.send(wire)).catch(() => {});
      await Promise.race([this.ended, delay(END_TIMEOUT)]);
    }
    if (!this.#ended) {
      try {
        this.#process.kill("SIGKILL");
      } catch {
        // Ended in the meantime.
      }
      await this.ended;
    }
    for (const socket of [this.#shell, this.#control, this.#iopub]) socket?.close();
    await Deno.remove(this.#folder, { recursive: true }).catch(() => {});
  }

  async #connect(ports: { shell_port: number; iopub_port: number; control_port: number }) {
    const deadline = Date.now() + START_TIMEOUT;
    this.#shell = await this.#reach(ports.shell_port, "DEALER", deadline);
    this.#control = await this.#reach(ports.control_port, "DEALER", deadline);
    this.#iopub = await this.#reach(ports.iopub_port, "SUB", deadline);
    this.#pump(this.#shell, (message) => this.#settle(message));
    this.#pump(this.#control, () => {});
    this.#pump(this.#iopub, (message) => this.#listener(message));
    // A subscription takes effect some time after it is sent: ask until a broadcast arrives.
    const heard = new Promise<void>((resolve) => this.listen(() => resolve()));
    for (;;) {
      await (await this.#ask("kernel_info_request", {})).reply;
      const got = await Promise.race([heard.then(() => true), delay(50).then(() => false)]);
      if (got) return;
      this.#checkStart(deadline);
    }
  }

  async #reach(port: number, type: "DEALER" | "SUB", deadline: number): Promise<ZmtpSocket> {
    for (;;) {
      this.#checkStart(deadline);
      try {
        return await ZmtpSocket.connect(port, type);
      } catch (error) {
        if (!(error instanceof Deno.errors.ConnectionRefused)) throw error;
        await delay(20);
      }
    }
  }

  #checkStart(deadline: number): void {
    if (this.#ended) {
      throw new KernelError(
        `Cannot start the Deno kernel: it ended at once. ${this.standardError}`,
      );
    }
    if (Date.now() > deadline) {
      throw new KernelError(
        `Cannot start the Deno kernel: it did not answer within ${START_TIMEOUT / 1000} s`,
      );
    }
  }

  async #ask(type: string, content: Readonly<Record<string, unknown>>): Promise<Exchange> {
    const message = request(type, content, this.#session);
    const id = message.header.msg_id;
    const reply = new Promise<JupyterMessage | undefined>((resolve) => {
      if (this.#ended) resolve(undefined);
      else this.#waiting.set(id, resolve);
    });
    await this.#shell.send(await this.#signer.encode(message)).catch((error) => {
      if (!this.#ended) throw error;
    });
    return { id, reply };
  }

  #settle(message: JupyterMessage): void {
    const id = message.parent_header.msg_id ?? "";
    this.#waiting.get(id)?.(message);
    this.#waiting.delete(id);
  }

  async #pump(socket: ZmtpSocket, take: (message: JupyterMessage) => void): Promise<void> {
    for (;;) {
      const wire = await socket.receive();
      if (!wire) return;
      take(await this.#signer.decode(wire));
    }
  }

  async #collectStderr(): Promise<void> {
    const decoder = new TextDecoderStream();
    for await (const text of this.#process.stderr.pipeThrough(decoder as never)) {
      this.#stderr = (this.#stderr + text).slice(-4000);
    }
  }
}

/** Ports on loopback that nobody uses now. */
function freePorts(count: number): number[] {
  const listeners = Array.from(
    { length: count },
    () => Deno.listen({ hostname: "127.0.0.1", port: 0 }),
  );
  const ports = listeners.map((listener) => listener.addr.port);
  for (const listener of listeners) listener.close();
  return ports;
}

function delay(ms: number): Promise<void> {
  return new Promise((resolve) => {
    const timer = setTimeout(resolve, ms);
    Deno.unrefTimer(timer);
  });
}
