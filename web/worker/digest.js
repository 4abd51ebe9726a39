"use strict";
// Runs the engine of a built page under Node and prints the digest of each rival's log:
//   node digest.js PAGE.html SCENARIO.toml RIVALS TICKS_A_SLICE
const { readFileSync } = require("node:fs");
const { join } = require("node:path");
const vm = require("node:vm");

const [page, scenario, rivals, slice] = process.argv.slice(2);
const found = readFileSync(page, "utf8").match(
  /id="pack" data-lengths="([^"]*)" data-streams="([^"]*)">([^<]*)</,
);
if (found === null) throw new Error(`${page} holds no packed modules`);
const [lengths, streams] = found.slice(1, 3).map((text) => text.split(",").map(Number));

vm.runInThisContext(readFileSync(join(__dirname, "../unpack.js"), "utf8"));
const unpacked = unpackLzma(new Uint8Array(Buffer.from(found[3], "base64")));
const [, engine, script] = joinStreams(unpacked, streams, lengths);

vm.runInThisContext(Buffer.from(script).toString("utf8"));
globalThis.hullwardModule = new WebAssembly.Module(engine);
globalThis.hullwardScenario = readFileSync(scenario, "utf8");
vm.runInThisContext("wasm_bindgen.initSync({ module: hullwardModule })");
for (let rival = 0; rival < Number(rivals); rival += 1) {
  console.log(vm.runInThisContext(`wasm_bindgen.digest(hullwardScenario, ${rival}, ${slice})`));
}
process.exit(0); // the worker's message channel would keep Node waiting
