// Unpacks the program that this file carries and starts it, or says in the
// page why it cannot. The assembler puts the generated glue into `glue`.
(function () {
  "use strict";

  // Called when this script has ended: the glue asks for the address of the
  // running script, which a frame with srcdoc does not have.
  function glue() {
    /*{{glue}}*/
    return wasm_bindgen;
  }

  function say(sentence) {
    const place = document.getElementById("starting");
    place.setAttribute("role", "alert");
    place.textContent = sentence;
  }

  async function unpack() {
    const text = document.getElementById("wasm").textContent;
    const packed = Uint8Array.from(atob(text), (letter) => letter.charCodeAt(0));
    const stream = new Blob([packed]).stream();
    const unpacked = stream.pipeThrough(new DecompressionStream("deflate-raw"));
    return new Response(unpacked).arrayBuffer();
  }

  async function start() {
    const bytes = await unpack();
    const program = glue();
    await program({ module_or_path: bytes });
    program.start();
    document.getElementById("starting").remove();
    document.documentElement.dataset.version = program.version();
  }

  if (typeof WebAssembly !== "object") {
    say(
      "Kelvinclock cannot start: WebAssembly is switched off in this browser. " +
        "Ask whoever administers the browser to allow it, or open the file in another one.",
    );
  } else if (typeof DecompressionStream !== "function") {
    say(
      "Kelvinclock cannot start: this browser is too old (it lacks DecompressionStream). " +
        "Open the file in a browser of 2023 or later.",
    );
  } else {
    start().catch((error) => {
      console.error(error);
      if (error instanceof WebAssembly.CompileError) {
        say(
          "Kelvinclock cannot start: the page around this frame forbids WebAssembly. " +
            "Embed the file by its address (an iframe with src), not by its text (srcdoc), " +
            "or open it on its own. The browser says: " +
            error.message,
        );
      } else {
        say("Kelvinclock cannot start. The browser says: " + error);
      }
    });
  }
})();
