"use strict";
// The second opinion's side of the page: one message is the compiled module, every other one a
// relaxation, answered by an opinion; those that come before it wait for it. A failure is told as a
// string; the page then replaces the worker.
(() => {
  const early = [];
  let ready = false;

  function answer(relaxation) {
    const opinion = wasm_bindgen.answer(relaxation);
    postMessage(opinion, [opinion.buffer]);
  }

  globalThis.onmessage = ({ data }) => {
    try {
      if (ready) {
        answer(data);
      } else if (data instanceof WebAssembly.Module) {
        wasm_bindgen.initSync({ module: data });
        ready = true;
        early.splice(0).forEach(answer);
      } else {
        early.push(data);
      }
    } catch (error) {
      postMessage(`The second LP code failed: ${error}`);
    }
  };
})();
