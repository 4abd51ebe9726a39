"use strict";
// The worker's side of the page: one message is the compiled engine, every other one a request;
// those that come before it wait for it. Work is cut into slices, and each next slice is a message of its own (setTimeout would
// wait for milliseconds, a promise would not let messages in), so that a request is heard between
// two slices. A failure is told as a string; the page then replaces the worker.
(() => {
  const turn = new MessageChannel();
  const early = [];
  let host = null;
  let planned = false;
  let failed = false;

  function guard(act) {
    if (failed) return;
    try {
      act();
    } catch (error) {
      failed = true;
      postMessage(`The engine failed: ${error}`);
    }
  }

  function plan() {
    if (planned) return;
    planned = true;
    turn.port2.postMessage(null);
  }

  function send() {
    for (let bytes = host.take(); bytes !== undefined; bytes = host.take()) {
      postMessage(bytes, [bytes.buffer]);
    }
  }

  turn.port1.onmessage = () =>
    guard(() => {
      planned = false;
      const busy = host.slice();
      send();
      if (busy) plan();
    });

  function receive(data) {
    if (!(data instanceof Uint8Array)) throw new TypeError("a request is bytes");
    host.receive(data);
    plan();
  }

  globalThis.onmessage = ({ data }) =>
    guard(() => {
      if (host !== null) {
        receive(data);
      } else if (data instanceof WebAssembly.Module) {
        wasm_bindgen.initSync({ module: data });
        host = new wasm_bindgen.Host();
        early.splice(0).forEach(receive);
      } else {
        early.push(data);
      }
    });
})();
