#!/usr/bin/env node
/** The executable `emberline`. */
import { main } from "./program.ts";

process.exitCode = await main(process.argv.slice(2));
