import { arrhenius } from "./arrhenius.ts";
import type { Command } from "./command.ts";
import { rateLaw } from "./rate_law.ts";
import { report } from "./report.ts";
import { simulate } from "./simulate.ts";

/** All commands, in the order of the help. */
export const COMMANDS: readonly Command[] = [rateLaw, arrhenius, simulate, report];
