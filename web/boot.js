"use strict";
// Opens the page out of its own file: page module, engine module, the second LP code's module and
// the workers' scripts stand in it packed into one. Each is compiled once here; the page posts the
// compiled modules to its workers.
(async () => {
  const notice = document.getElementById("boot");

  function unpack() {
    const element = document.getElementById("pack");
    const packed = atob(element.textContent);
    element.remove();
    const bytes = new Uint8Array(packed.length);
    for (let i = 0; i < packed.length; i += 1) bytes[i] = packed.charCodeAt(i);
    const numbers = (text) => text.split(",").map(Number);
    const { lengths, streams } = element.dataset;
    return joinStreams(unpackLzma(bytes), numbers(streams), numbers(lengths));
  }

  try {
    const [pageBytes, engineBytes, engineScript, opinionBytes, opinionScript] = unpack();
    const [page, engine, opinion] = await Promise.all(
      [pageBytes, engineBytes, opinionBytes].map((bytes) => WebAssembly.compile(bytes)),
    );
    // Where the browser knows trusted types, these two scripts alone may become workers.
    const trust = globalThis.trustedTypes?.createPolicy("hullward", {
      createScriptURL: (address) => address,
    });
    const address = (script) => {
      const blob = URL.createObjectURL(new Blob([script], { type: "text/javascript" }));
      return trust ? trust.createScriptURL(blob) : blob;
    };
    globalThis.hullward = Object.freeze({
      engineModule: engine,
      workerUrl: address(engineScript),
      opinionModule: opinion,
      opinionUrl: address(opinionScript),
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
