import { parentPort } from "node:worker_threads";
import fc from "fast-check";

// Vitest calls removeAllListeners when a worker ends; Deno 2.9.6 has the method but throws
// "Not implemented" from it. Nothing listens any more at that point.
if (parentPort) parentPort.removeAllListeners = () => parentPort!;

// Property tests draw the same cases in every run.
fc.configureGlobal({ seed: 20_190_520 });
