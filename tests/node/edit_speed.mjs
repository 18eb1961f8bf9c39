// How long an edit takes in the page, beside a million Math.exp calls in the same page:
//
//   chromedriver --port=9517 &
//   node tests/node/edit_speed.mjs [page.html]
//
// An edit lasts from the input event in a cell of the example to the last call on any canvas; both
// numbers are medians of 50. A benchmark, not a check: it judges nothing.

import { resolve } from "node:path";
import { pathToFileURL } from "node:url";

const DRIVER = "http://127.0.0.1:9517";
const page = pathToFileURL(resolve(process.argv[2] ?? "www-demo/kelvinclock.html")).href;

async function ask(method, path, body) {
  const answer = await fetch(DRIVER + path, { method, body: body && JSON.stringify(body) });
  const { value } = await answer.json();
  if (value?.error) throw new Error(`${value.error}: ${value.message}`);
  return value;
}

// Runs in the page.
async function measure() {
  const done = arguments[arguments.length - 1];
  const repeats = 50;
  const median = (numbers) => [...numbers].sort((a, b) => a - b)[numbers.length >> 1];
  const quiet = () => new Promise((resolve) => setTimeout(resolve, 60));

  let last = 0;
  const canvas = CanvasRenderingContext2D.prototype;
  for (const name of Object.getOwnPropertyNames(canvas)) {
    const own = Object.getOwnPropertyDescriptor(canvas, name);
    if (typeof own.value !== "function") continue;
    canvas[name] = function (...given) {
      const result = own.value.apply(this, given);
      last = performance.now();
      return result;
    };
  }

  const cell = document.querySelectorAll("table input:not([type=checkbox])")[4];
  const edits = [];
  for (let i = 0; i < repeats + 5; i += 1) {
    cell.value = `33.${i}`;
    const start = performance.now();
    cell.dispatchEvent(new InputEvent("input", { bubbles: true }));
    await quiet();
    edits.push(last - start);
  }

  const exponentials = [];
  for (let i = 0; i < repeats; i += 1) {
    const start = performance.now();
    let sum = 0;
    for (let j = 0; j < 1e6; j += 1) sum += Math.exp(-1e-6 * j);
    exponentials.push(performance.now() - start);
    if (!(sum > 0)) throw new Error("the loop was left out");
  }
  // The first edits warm up.
  done({ cell: cell.ariaLabel, edit: median(edits.slice(5)), exponentials: median(exponentials) });
}

const flags = ["--headless", "--no-sandbox", "--disable-gpu", "--no-first-run"];
const capabilities = { alwaysMatch: { "goog:chromeOptions": { args: flags } } };
const { sessionId } = await ask("POST", "/session", { capabilities });
try {
  const session = `/session/${sessionId}`;
  await ask("POST", `${session}/timeouts`, { script: 60_000 });
  await ask("POST", `${session}/url`, { url: page });
  while (!(await ask("POST", `${session}/execute/sync`, {
    script: "return !!document.documentElement.dataset.version",
    args: [],
  })));
  const script = `(${measure}).apply(null, arguments)`;
  const { cell, edit, exponentials } = await ask("POST", `${session}/execute/async`, { script, args: [] });
  console.log(`${cell}: an edit takes ${edit.toFixed(2)} ms, 1e6 Math.exp ${exponentials.toFixed(2)} ms`);
  console.log(`ratio ${(edit / exponentials).toFixed(2)}`);
} finally {
  await ask("DELETE", `/session/${sessionId}`);
}
