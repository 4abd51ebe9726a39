"use strict";
// Opens the page out of its own file: each part stands in it as base64 of gzip. The engine is
// compiled once here; the page posts the compiled module to each of its workers.
(async () => {
  const notice = document.getElementById("boot");

  async function unpack(id) {
    const element = document.getElementById(id);
    const packed = atob(element.textContent);
    element.remove();
    const bytes = new Uint8Array(packed.length);
    for (let i = 0; i < packed.length; i += 1) bytes[i] = packed.charCodeAt(i);
    const stream = new Blob([bytes]).stream().pipeThrough(new DecompressionStream("gzip"));
    return new Response(stream).arrayBuffer();
  }

  async function compile(id) {
    return WebAssembly.compile(await unpack(id));
  }

  try {
    const [page, engine, script] = await Promise.all([
      compile("page-module"),
      compile("engine-module"),
      unpack("worker-script"),
    ]);
    const blob = new Blob([script], { type: "text/javascript" });
    globalThis.hullward = Object.freeze({
      engineModule: engine,
      workerUrl: URL.createObjectURL(blob),
    });
    await wasm_bindgen({ module_or_path: page });
    notice.remove();
    document.documentElement.dataset.boot = "done";
  } catch (error) {
    notice.setAttribute("role", "alert");
    notice.textContent =
      "Hullward needs WebAssembly and could not start. A current browser with WebAssembly " +
      `allowed opens it. What the browser said: ${error}`;
    document.documentElement.dataset.boot = "failed";
  }
})();
