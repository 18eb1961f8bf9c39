// The JavaScript interface as another program uses it: the package for Node is
// loaded from the folder KELVINCLOCK_PACKAGE, or from target/kelvinclock-node,
// where `cargo pack test` builds it. To run it alone:
//   node --test tests/node/evaluate.mjs

import assert from "node:assert/strict";
import { readFileSync } from "node:fs";
import { createRequire } from "node:module";
import { join } from "node:path";
import { test } from "node:test";
import { fileURLToPath } from "node:url";

const root = fileURLToPath(new URL("../..", import.meta.url));
const folder = process.env.KELVINCLOCK_PACKAGE ?? join(root, "target/kelvinclock-node");
const { evaluate, read_table, version } = createRequire(import.meta.url)(join(folder, "web.js"));

// An invented hardener that follows ln k = ln(1e-6/s) - Ea/R (1/T - 1/333.15 K)
// to the last digit, so that what must come out is known without this program.
const R = 8.31446261815324;
const ENERGY = 90_000;
const rate = (kelvin) => 1e-6 * Math.exp((-ENERGY / R) * (1 / kelvin - 1 / 333.15));
const CELSIUS = [50, 60, 70, 80, 90];
const rows = CELSIUS.map((celsius) => {
  const perHour = rate(celsius + 273.15) * 3600;
  return `${celsius}\t${perHour}\t${perHour * 0.05}`;
});
const TEXT = ["T/°C\tk, 1/h\ts(k)", ...rows].join("\n");

const celsius = (value) => ({ value, unit: "°C" });
const percent = (value) => ({ value, unit: "%" });

function study(more) {
  return { kelvinclock: 1, title: "Hardener", measured: { form: "rates", text: TEXT }, ...more };
}

const ASKED = [
  { question: "time-to-extent", temperature: celsius(25), gone: percent(5) },
  {
    question: "time-to-extent",
    temperature: [celsius(60), celsius(70)],
    gone: [percent(5), percent(10)],
  },
  { question: "longest-stand", temperature: celsius(60), keep: percent(90) },
  { question: "speed-up", to: celsius(70), from: celsius(60) },
  { question: "rate-at", temperature: { value: 333.15, unit: "K" } },
  { question: "rate-at" },
];

function close(found, expected, tolerance = 1e-6) {
  const off = Math.abs(found / expected - 1);
  assert.ok(off <= tolerance, `found ${found}, expected ${expected} within ${tolerance}`);
}

function hasKeys(object, keys, where) {
  for (const key of keys) assert.ok(key in object, `${where} lacks ${key}`);
}

const ESTIMATE = ["value", "standard_error", "low", "high", "level", "unit"];
const ANSWER = [
  ..."question value low high unit level side grounds rival_low rival_high".split(" "),
  ..."sentence detail rows refused".split(" "),
];

test("findings have every key of the format", () => {
  const findings = evaluate(study({ asked: ASKED }));
  assert.equal(findings.kelvinclock_findings, 1);
  const top = "read problems runs law one_stage rivals remarks answers record".split(" ");
  hasKeys(findings, top, "findings");
  const read = "form decimal columns rows_read rows_excluded order scatter".split(" ");
  hasKeys(findings.read, read, "read");
  const law =
    "kind rate_unit assumed reference_temperature_kelvin covariance degrees_of_freedom " +
    "scatter run_to_run_sd mixture chi_squared chi_squared_p";
  hasKeys(findings.law, law.split(" "), "law");
  const estimates =
    "ln_rate_at_reference activation_energy ln_pre_exponential_factor " +
    "pre_exponential_factor enthalpy_of_activation entropy_of_activation";
  for (const name of estimates.split(" ")) hasKeys(findings.law[name], ESTIMATE, name);
  for (const run of findings.runs) {
    hasKeys(run, ["label", "temperature_kelvin", "rate_constant", "order"], "run");
    hasKeys(run.rate_constant, ESTIMATE, "rate_constant");
  }
  for (const answer of findings.answers) hasKeys(answer, ANSWER, answer.question);
  hasKeys(findings.record, ["text", "citations", "version", "input_sha256"], "record");
});

test("values are those of the law behind the data", () => {
  const { law, runs, read, answers } = evaluate(study({ asked: ASKED }));
  assert.equal(read.rows_read, CELSIUS.length);
  assert.equal(read.order, 1);
  assert.equal(law.kind, "arrhenius");
  assert.equal(law.rate_unit, "1/s");
  assert.equal(law.degrees_of_freedom, 3);
  close(law.activation_energy.value, ENERGY);
  assert.equal(law.activation_energy.unit, "J/mol");
  assert.ok(law.activation_energy.low < ENERGY && ENERGY < law.activation_energy.high);
  close(runs[1].temperature_kelvin, 333.15);

  const [one, several, stand, faster, at] = answers;
  close(one.value, -Math.log(0.95) / rate(298.15));
  assert.equal(one.unit, "s");
  assert.ok(one.low < one.value && one.value < one.high);
  assert.ok(one.sentence.length > 20);
  close(faster.value, rate(343.15) / rate(333.15));
  close(at.value, 1e-6);
  assert.equal(at.grounds, "inside");

  assert.equal(several.value, null);
  assert.equal(several.rows.length, 4);
  const expected = [
    [60, 5],
    [60, 10],
    [70, 5],
    [70, 10],
  ];
  expected.forEach(([temperature, gone], index) => {
    const row = several.rows[index];
    assert.equal(row.blanks.temperature.value, temperature);
    assert.equal(row.blanks.gone.value, gone);
    close(row.value, -Math.log(1 - gone / 100) / rate(temperature + 273.15));
  });

  assert.equal(stand.side, "lower");
  assert.equal(stand.high, null);
  assert.ok(stand.low < stand.value);
});

test("the next measurement is planned for another question", () => {
  const range = { lowest: celsius(40), highest: celsius(60) };
  const next = (more) => ({ question: "next-measurement", for: 0, ...range, ...more });
  const [, free, patient, none] = evaluate(
    study({
      asked: [
        ASKED[0],
        next(),
        next({ relative_error: percent(5), within: { value: 5, unit: "d" } }),
        next({ for: 9 }),
      ],
    }),
  ).answers;
  assert.equal(free.unit, "K");
  close(free.value, 313.15);
  const { now, after, curve } = free.detail;
  assert.ok(1 < after && after < now);
  assert.equal(curve.length, 21);
  close(curve[0].temperature, 313.15);
  close(curve[0].duration, -Math.log(0.9) / rate(313.15));
  close(curve[0].after, after);
  assert.ok(patient.value > free.value && patient.detail.duration < 5 * 86400);
  assert.match(none.refused.reason, /no question 10/);
});

test("a question that cannot be answered is refused in words", () => {
  const { refused, value, low, high } = evaluate(study({ asked: ASKED })).answers[5];
  assert.deepEqual([value, low, high], [null, null, null]);
  assert.ok(refused.reason.length > 10 && refused.needs.length > 5);
});

test("findings are plain JSON, the same each time, and leave the study alone", () => {
  const given = study({ asked: ASKED });
  const before = structuredClone(given);
  const findings = evaluate(given);
  assert.deepEqual(JSON.parse(JSON.stringify(findings)), findings);
  assert.deepEqual(evaluate(given), findings);
  assert.deepEqual(given, before);
});

test("a cell that is no number is told with its place", () => {
  const text = TEXT.replace(/^60\t0\.00/m, "60\t0.0O");
  assert.notEqual(text, TEXT);
  const { problems, read } = evaluate(study({ measured: { form: "rates", text } }));
  assert.equal(problems.length, 1);
  hasKeys(problems[0], ["row", "column", "column_name", "found", "expected", "sentence"], "problem");
  assert.deepEqual([problems[0].row, problems[0].column], [3, 2]);
  assert.ok(problems[0].found.startsWith("0.0O"));
  assert.equal(read.rows_read, CELSIUS.length - 1);
});

test("what is no study throws an Error that says so", () => {
  const circle = { kelvinclock: 1 };
  circle.circle = circle;
  const none = [undefined, null, 3, "{}", [], {}, { title: "x" }, () => 1, Symbol("x"), circle];
  for (const value of [...none, { kelvinclock: 1n }]) {
    assert.throws(
      () => evaluate(value),
      (error) => error instanceof Error && !(error instanceof RangeError) && error.message.length > 20,
    );
  }
  assert.throws(() => evaluate({}), /kelvinclock/);
});

test("what is a study never throws, however odd", () => {
  const odd = [
    { kelvinclock: 1 },
    { kelvinclock: 99, measured: { text: TEXT }, of_later: true },
    { kelvinclock: 1, measured: 5, assumed: "much", asked: "why" },
    study({ asked: [{ question: "how-come" }, {}, 7] }),
    study({ assumed: { level: 7, order: "odd", scatter: null } }),
    study({ measured: { form: "rates", text: "\0\u{1f600}\t\n\n;;;" } }),
    study({ measured: { form: "rates", text: TEXT, excluded: [{ row: -1 }] } }),
  ];
  for (const value of odd) assert.equal(evaluate(value).kelvinclock_findings, 1);
  assert.ok(evaluate(odd[2]).problems.length > 0);
});

test("read_table tells what a text is taken to mean", () => {
  const table = read_table(`${TEXT}\n100\tn.d.\t`);
  const { columns, rows, problems } = table;
  assert.deepEqual(
    columns.map(({ role, unit }) => [role, unit]),
    [
      ["temperature", "°C"],
      ["rate-constant", "1/h"],
      ["sd", columns[2].unit],
    ],
  );
  assert.equal(table.form, "rates");
  assert.equal(table.decimal, ".");
  assert.deepEqual(problems, []);
  assert.equal(rows.length, CELSIUS.length + 1);
  assert.equal(rows[0].row, 2);
  assert.deepEqual(rows[0].cells[0], { text: "50", kind: "number", value: 50, error: null });
  assert.equal(rows[5].cells[1].kind, "not-determined");
  assert.deepEqual(JSON.parse(JSON.stringify(table)), table);
});

test("read_table heeds hints and refuses what are none", () => {
  const text = "1,234\t5\n2,345\t6";
  const hint = (decimal) => read_table(text, { decimal }).rows[0].cells[0].value;
  assert.equal(hint(","), 1.234);
  assert.equal(hint("."), 1234);
  const columns = [{ role: "temperature", unit: "°C" }, { role: "label" }];
  assert.equal(read_table(text, { columns }).columns[1].role, "label");
  assert.deepEqual(read_table(text, null), read_table(text));
  for (const none of [3, [], { decimal: "x" }, { columns: [{ role: "king" }] }]) {
    assert.throws(() => read_table(text, none), Error);
  }
});

test("the version is the workspace's, also in the record", () => {
  const manifest = readFileSync(join(root, "Cargo.toml"), "utf8");
  const [, expected] = /^version = "(.+)"$/m.exec(manifest);
  assert.equal(version(), expected);
  assert.ok(evaluate(study()).record.version.includes(expected));
});

test("types come with the package", () => {
  const types = readFileSync(join(folder, "web.d.ts"), "utf8");
  for (const part of [
    "export interface Study {",
    "export interface Findings {",
    "export function evaluate(study: Study): Findings;",
    "export function read_table(text: string, hints?: Hints): Table;",
    "export function version(): string;",
  ]) {
    assert.ok(types.includes(part), `the types lack ${part}`);
  }
});
