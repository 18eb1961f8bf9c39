// The page's own unpacking against files that another program packed:
//   xz --format=lzma --lzma1=preset=9e,lc=4,lp=0,pb=0 (XZ Utils 5.4.1), likewise lc=0,lp=2,pb=2.

import assert from "node:assert/strict";
import { readFileSync } from "node:fs";
import { test } from "node:test";

const source = readFileSync(new URL("../../web/pack/src/unlzma.js", import.meta.url), "utf8");
const unlzma = new Function(source + "return unlzma;")();

/// Noise, rows alike, the noise again, one byte repeated, the rows again: every kind of symbol.
function sample() {
  let seed = 1;
  const random = () => (seed = (seed * 48271) % 2147483647);
  const noise = Array.from({ length: 200 }, () => random() & 255);
  const row = (i) => `${50 + (i % 7)}\t0.${1000 + ((i * 37) % 900)}\n`;
  const rows = Array.from({ length: 300 }, (_, i) => row(i)).join("");
  const text = [...new TextEncoder().encode(rows)];
  return Uint8Array.from([...noise, ...text, ...noise, ...new Array(700).fill(7), ...text]);
}

const packed = {
  "lc=4,lp=0,pb=0": [
    "BAAAAAT//////////wBHukmdelsVH6jucMAuwrmSBEHtjv8OLn2Tzxjlg8yXEopjKvgbbdppLppbVpWDWqJqNCj1u0tX",
    "+yVcVNHn5HJb0GoYko6t4JkbSiQuSzA95ApHj2LviqzuYplZALunzwy3U6xZYgG25E1BgSN1+leuMhZDsvsQk1mu4ECq",
    "EcqgkHA/kw1hI4I563ttV5PSPfZC2KmOog4K4+7tWUiAANim5gLN4r2lBerP9Og1s/qF7wkIvH5qRZhe3SqqWLh00xxV",
    "S58ys1NaNqfouMGuwhpESH4tNYYkNBQh022XV+Z7J14Kj5MWXF9e7WovNC1AXHCZ24NVX41aaIMlYCMZrXtRKyMVlRnh",
    "F0W/hjHVhnMUIo+lzVSdlCdDTOhUTnsE7KNM4q/lUxTrfqQk+5g5LKI3/wsoEsWZ+1ZW4ySsN5QyiY/LpeZqT9j7eSLB",
    "tqcvVPb7e4DCzK8rL5XnRW50gNU31RF2L0riX5DBT3a3mOFRdZhYLJURSWN49TsXb/+ue+ZosaKJcgSBs2zrlktGgq7g",
    "IIV3TxfbmDILcb6wkpZEZFJRUCm3mQ9yXelDpbJ6iSdtkAzrUot8rzPQV9xOHlMMBIf446HiqaENV7nw2H/C/ehdImi8",
    "bV8Fy98ZsFXCZbFVU3nJx0ExbDVvjUZtnED/HlK4TkxGwuud0kgqtSOBrhZIIxSPVe3F/LVR9YcMXJMhEIh/U7Two2gc",
    "0PRjIb5KALng1CfdTwl+6SYLYn+m6DdgE2XpTBHgOXTWIfpIdH0F3zMOb04v7TxG8NWehDEgxCNq3HACmitZVknRkuuw",
    "dtY9T5CDQ5wYvXVE+WacldcTlo6c8tMy+HWhizPkJWfDedr+CE85av+yVy85JeCrf8kqqTEt4JfzqNs1sQNedcaFnM4w",
    "XJIQKyqA8GumjpZNav3uq67Fi/wneXhOkBjT23zMF2H3q5Q8qYJc4Y2xb38c12fMVhMNEms+aAm9uuTNpP/54wJk",
  ],
  "lc=0,lp=2,pb=2": [
    "bAAAAAT//////////wBHuITH18TuxtACgCUvOw5u5azlS5dGO+cVV4d/c60W5HM/O7t5jh+dnZ4ICb7ouI41x69/zuRl",
    "wrrWbuDH2Xn+/f0jfEtIqw4DYDveG9pd4pWzaw7adLNLxi57I3+yswYm+Uhi1Z954S/2/cO1rWhGLv/Qgi+uCiLox4Gd",
    "fALwf96uXti+g/K6Bcr8kh9Wkp+0y5NRVw3KvCojeUmFWW6EGn4c9k9s2AKT+RGFTUYf5n9H80RNnAyPmMGEZeJTrmkY",
    "5MF1hutrB5OQh+hpjqYZViIhkM+shQVa4FUJyEwgX8d03W/bhHhI4v483Gphux9QQyxJ56uImQiZCNeeIRqOPGNpax9p",
    "jZmkdB90pMQdP2LzBXAzPIRzNVxRnGbTuYILcKzt7Pk1el5QaZuYBICVyXsBE9/kp3iKIns3SYGQRQGk/Kkfo421u0Tn",
    "2YOW7K2uxpGVcm7BnJndGbbs4gVcls3WNyAAXWB2QnwZCGlWOy45VBfbXv0B7ydHc/3NWkuADsye3DKMSUq6AoEDsZZz",
    "mn1+wsrCNJ4eShw6L+Xm22W2upzwfX0dQ9VD9AkcCO6egRQepHwvy40qZrw9zATy2RaTby5SyFz/MEJ30g6lURHzJbeX",
    "dv1I/jdnfT53C5Xdy0/3W7yANoe1o4yBBVYffo9sDksrdCwDUoKKStTnaXQ/px6KOsvSVJhhEU7ol3K8KPsrYP60owuC",
    "+u0qgkO+yM1MG1PTHyUQQ6sFvbJqtHclEjJukjZYGLHWfzB9Oyis965o+Gmrvmgl5WbJLl4aSe0lvGk6hAjOTHmPc68z",
    "jLjKUrSkg2ul9xCyyp26BfPHR/PzNElXy3NlFCfV+PPOrdxjOhXAs/LuyqjkGC28qGBQYlDdDdH43qz0WK/0xfr5t5Xs",
    "7qnYTUlIt/i2J0zNEAEsdy9lKSFJu/kwn7zqNthRJlHpwe4oIMrEW6BHuI81QGFYiVyStCYvHK9n8qZjceSQDWxX+cdF",
    "r7Erp5Y5uvM+h1j8E9sHHYs5w/pAVNi96Y+++7kQz1HFsVm68NKKYdM0CjFPUXPb66iR3jS9fDVjRIZyA/+kmOfJ1+7O",
    "ZKv+h31sg3hKX4YyK0DkaVtA+k8J6D6OF4r76vTG76hYpRGIZnmyKm2iibYO2uzh4FKPLnYf/nBDPQ==",
  ],
};

function file(name) {
  const bytes = new Uint8Array(Buffer.from(packed[name].join(""), "base64"));
  // xz leaves the length open; the page's packer states it.
  new DataView(bytes.buffer).setBigUint64(5, BigInt(sample().length), true);
  return bytes;
}

for (const name of Object.keys(packed)) {
  test(`unpacks what xz packed with ${name}`, () => {
    assert.deepEqual(unlzma(file(name)), sample());
  });
}

test("what is cut short or damaged is refused", () => {
  const whole = file("lc=4,lp=0,pb=0");
  assert.throws(() => unlzma(whole.slice(0, 400)), /cut short/);
  const damaged = whole.slice();
  damaged.fill(255, 14, 19);
  assert.throws(() => unlzma(damaged), /damaged|cut short/);
});
