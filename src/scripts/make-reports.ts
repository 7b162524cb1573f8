/** Writes the examples in reports/: `npm run reports`. */
import { mkdirSync, writeFileSync } from "node:fs";
import { join, resolve } from "node:path";
import { makeReports } from "./reports.ts";

const folder = resolve(import.meta.dirname, "../../reports");
mkdirSync(folder, { recursive: true });
for (const [name, content] of await makeReports()) {
  writeFileSync(join(folder, name), content);
  console.log(`reports/${name}: ${content.length} characters`);
}
