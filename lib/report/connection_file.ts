/** Where a kernel listens and with which key it signs, as its connection file tells it.
 *
 * Source: Jupyter client documentation, "Connection files", protocol 5.3. */
export interface ConnectionFile {
  /** Path of the file. */
  readonly path: string;
  /** Key of the signatures. */
  readonly key: string;
  /** Ports on loopback. */
  readonly ports: {
    readonly shell_port: number;
    readonly iopub_port: number;
    readonly stdin_port: number;
    readonly control_port: number;
    readonly hb_port: number;
  };
  /** Removes the file and its folder. */
  remove(): Promise<void>;
}

/** Writes a connection file with free ports and a new key in a temporary folder of its own. */
export async function writeConnectionFile(): Promise<ConnectionFile> {
  const [shell_port, iopub_port, stdin_port, control_port, hb_port] = freePorts(5);
  const ports = { shell_port, iopub_port, stdin_port, control_port, hb_port };
  const key = crypto.randomUUID();
  const folder = await Deno.makeTempDir({ prefix: "ratebook-kernel-" });
  const path = `${folder}/connection.json`;
  const remove = () => Deno.remove(folder, { recursive: true }).catch(() => {});
  const content = {
    ...ports,
    transport: "tcp",
    ip: "127.0.0.1",
    key,
    signature_scheme: "hmac-sha256",
    kernel_name: "deno",
  };
  try {
    await Deno.writeTextFile(path, JSON.stringify(content), { mode: 0o600 });
  } catch (error) {
    await remove();
    throw error;
  }
  return { path, key, ports, remove };
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
