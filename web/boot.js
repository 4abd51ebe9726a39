"use strict";
// Opens the page out of its own file. Three packs stand in it: what draws the page with the
// workers' scripts, the engine, the second LP code. The first is unpacked and started while the
// file still arrives; the others are unpacked by a worker, so that the page answers meanwhile, and
// the second LP code once somebody asks for it. Each module is compiled once and posted to its
// workers.
(() => {
  const notice = document.getElementById("boot");
  const arrived = new Promise((resolve) => {
    document.addEventListener("DOMContentLoaded", resolve, { once: true });
  }).then(() => ["engine", "opinion"].forEach(take));
  // Where the browser knows trusted types, scripts made here alone may become workers.
  const trust = globalThis.trustedTypes?.createPolicy("hullward", {
    createScriptURL: (address) => address,
  });

  function address(script) {
    const blob = URL.createObjectURL(new Blob([script], { type: "text/javascript" }));
    return trust ? trust.createScriptURL(blob) : blob;
  }

  const ORDER = ["page", "engine", "opinion"];
  const packs = {};

  // Takes a pack out of the file: its bytes, and how to take them apart.
  function take(name) {
    const element = document.getElementById(`pack-${name}`);
    const text = atob(element.textContent);
    element.remove();
    const bytes = new Uint8Array(text.length);
    for (let i = 0; i < text.length; i += 1) bytes[i] = text.charCodeAt(i);
    const numbers = (list) => list.split(",").map(Number);
    const { streams, lengths } = element.dataset;
    packs[name] = { bytes, streams: numbers(streams), lengths: numbers(lengths) };
  }

  const ASIDE = `"use strict";
    ${unpackLzma}
    ${joinStreams}
    ${unpack}
    globalThis.onmessage = async ({ data }) => {
      try {
        const [module] = unpack(data);
        postMessage(await WebAssembly.compile(module));
      } catch (error) {
        postMessage(String(error));
      }
    };`;

  function compiledAside(name) {
    return new Promise((resolve, reject) => {
      const worker = new Worker(address(ASIDE));
      worker.onerror = (event) => reject(new Error(event.message));
      worker.onmessage = ({ data }) => {
        worker.terminate();
        if (data instanceof WebAssembly.Module) resolve(data);
        else reject(new Error(data));
      };
      // A pack is unpacked with those before it.
      worker.postMessage(ORDER.slice(0, ORDER.indexOf(name) + 1).map((of) => packs[of]));
    });
  }

  const modules = {};
  function module(name) {
    modules[name] ??= arrived.then(() => compiledAside(name));
    return modules[name];
  }

  // A worker at once; its module follows when it is there. Requests wait in the worker.
  function startWorker(name) {
    const worker = new Worker(globalThis.hullward.scripts[name]);
    module(name).then(
      (compiled) => worker.postMessage(compiled),
      (error) => worker.dispatchEvent(new ErrorEvent("error", { message: error.message })),
    );
    return worker;
  }

  function fail(words, error) {
    notice.setAttribute("role", "alert");
    notice.textContent = `${words} What the browser said: ${error}`;
    document.body.append(notice);
    document.documentElement.dataset.boot = "failed";
  }

  async function open() {
    take("page");
    const [page, engineScript, opinionScript] = unpack([packs.page]);
    const scripts = Object.freeze({ engine: address(engineScript), opinion: address(opinionScript) });
    globalThis.hullward = Object.freeze({ scripts, startWorker });
    await wasm_bindgen({ module_or_path: page });
    performance.mark("page open");
    document.documentElement.dataset.boot = "done";
    notice.textContent = "The engine is still arriving; what you enter waits for it.";
    try {
      await module("engine");
    } catch (error) {
      fail("The engine did not arrive whole, or the browser refuses it: load the page again.", error);
      return;
    }
    notice.remove();
    performance.mark("engine there");
    document.documentElement.dataset.engine = "done";
  }

  open().catch((error) =>
    fail(
      "Hullward needs WebAssembly and could not start. A current browser with WebAssembly allowed " +
        "opens it.",
      error,
    ),
  );
})();
