// Unpacks the program that this file carries and starts it, or says in the
// page why it cannot. The assembler puts the generated glue into `glue`.
(function () {
  "use strict";

  // Called when this script has ended: the glue asks for the address of the
  // running script, which a frame with srcdoc does not have. A promise that is
  // kept at once would still come before the script's end.
  function glue() {
    /*{{glue}}*/
    return wasm_bindgen;
  }

  function say(sentence) {
    const place = document.getElementById("starting");
    place.setAttribute("role", "alert");
    place.textContent = sentence;
  }

  /*{{unlzma}}*/

  async function start() {
    await new Promise((resolve) => setTimeout(resolve));
    const text = document.getElementById("wasm").textContent;
    const packed = Uint8Array.from(atob(text), (letter) => letter.charCodeAt(0));
    const program = glue();
    await program({ module_or_path: unlzma(packed) });
    program.start();
    document.getElementById("starting").remove();
    document.documentElement.dataset.version = program.version();
  }

  if (typeof WebAssembly !== "object") {
    say(
      "Kelvinclock cannot start: WebAssembly is switched off in this browser. " +
        "Ask whoever administers the browser to allow it, or open the file in another one.",
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
