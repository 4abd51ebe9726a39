"use strict";
// The second opinion's side of the page: the first message is the compiled module, every later
// one a relaxation, answered by an opinion. A failure is told as a string; the page then replaces
// the worker.
globalThis.onmessage = ({ data }) => {
  try {
    if (data instanceof WebAssembly.Module) {
      wasm_bindgen.initSync({ module: data });
    } else {
      const opinion = wasm_bindgen.answer(data);
      postMessage(opinion, [opinion.buffer]);
    }
  } catch (error) {
    postMessage(`The second LP code failed: ${error}`);
  }
};
