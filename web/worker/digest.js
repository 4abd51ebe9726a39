"use strict";
// Runs the engine of a built page under Node and prints the digest of each rival's log:
//   node digest.js PAGE.html SCENARIO.toml RIVALS TICKS_A_SLICE [RUNS]
// With RUNS each is run so many times, after two to warm up, and the shortest time in milliseconds
// stands behind its digest.
const { readFileSync } = require("node:fs");
const { join } = require("node:path");
const vm = require("node:vm");

const [page, scenario, rivals, slice, runs] = process.argv.slice(2);
const file = readFileSync(page, "utf8");

function pack(name) {
  const found = file.match(
    new RegExp(`id="pack-${name}" data-lengths="([^"]*)" data-streams="([^"]*)">([^<]*)<`),
  );
  if (found === null) throw new Error(`${page} holds no pack ${name}`);
  const [lengths, streams] = found.slice(1, 3).map((text) => text.split(",").map(Number));
  return { bytes: new Uint8Array(Buffer.from(found[3], "base64")), lengths, streams };
}

vm.runInThisContext(readFileSync(join(__dirname, "../unpack.js"), "utf8"));
const [, script] = unpack([pack("page")]);
const [engine] = unpack([pack("page"), pack("engine")]);

vm.runInThisContext(Buffer.from(script).toString("utf8"));
globalThis.hullwardModule = new WebAssembly.Module(engine);
globalThis.hullwardScenario = readFileSync(scenario, "utf8");
vm.runInThisContext("wasm_bindgen.initSync({ module: hullwardModule })");
for (let rival = 0; rival < Number(rivals); rival += 1) {
  const once = () => vm.runInThisContext(`wasm_bindgen.digest(hullwardScenario, ${rival}, ${slice})`);
  if (runs === undefined) {
    console.log(once());
    continue;
  }
  once();
  let best = Infinity;
  let line = once();
  for (let run = 0; run < Number(runs); run += 1) {
    const begun = performance.now();
    line = once();
    best = Math.min(best, performance.now() - begun);
  }
  console.log(`${line} ${best}`);
}
process.exit(0); // the worker's message channel would keep Node waiting
