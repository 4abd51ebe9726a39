"use strict";
// Runs the engine of a built page under Node and prints the digest of each rival's log:
//   node digest.js PAGE.html SCENARIO.toml RIVALS TICKS_A_SLICE
const { readFileSync } = require("node:fs");
const vm = require("node:vm");
const { gunzipSync } = require("node:zlib");

const [page, scenario, rivals, slice] = process.argv.slice(2);
const html = readFileSync(page, "utf8");

function unpack(id) {
  const found = html.match(new RegExp(`id="${id}">([^<]*)</script>`));
  if (found === null) throw new Error(`${page} holds no ${id}`);
  return gunzipSync(Buffer.from(found[1], "base64"));
}

vm.runInThisContext(unpack("worker-script").toString("utf8"));
globalThis.hullwardModule = new WebAssembly.Module(unpack("engine-module"));
globalThis.hullwardScenario = readFileSync(scenario, "utf8");
vm.runInThisContext("wasm_bindgen.initSync({ module: hullwardModule })");
for (let rival = 0; rival < Number(rivals); rival += 1) {
  console.log(vm.runInThisContext(`wasm_bindgen.digest(hullwardScenario, ${rival}, ${slice})`));
}
process.exit(0); // the worker's message channel would keep Node waiting
