/** A number with its unit, such as `{ value: 25, unit: "°C" }`. */
export interface Quantity {
  value: number;
  unit: string;
}

/** A quantity with its standard deviation in the same unit. */
export interface StatedQuantity extends Quantity {
  sd?: number;
}

export type Form = "rates" | "progress" | "times" | "heat-rates" | "peaks" | "known-law";

export type Role =
  | "temperature"
  | "inverse-temperature"
  | "rate-constant"
  | "ln-rate-constant"
  | "log10-rate-constant"
  | "time"
  | "signal"
  | "sd"
  | "run"
  | "label"
  | "group"
  | "heat-rate"
  | "heating-rate"
  | "ignore";

export type Decimal = "." | ",";

export type ErrorKind = "sd" | "standard-error" | "half-width-95";

export type TemperatureLaw =
  | "arrhenius"
  | "eyring"
  | "arrhenius-with-power"
  | "log-linear"
  | "curved";

/** A study, version 1. What is absent is inferred, and echoed in the findings. */
export interface Study {
  kelvinclock: number;
  title?: string;
  note?: string;
  measured?: Measured;
  assumed?: Assumed;
  heat?: { heat_of_reaction?: Quantity; heat_capacity?: Quantity; [key: string]: unknown };
  display?: { temperature?: string; energy?: string; time?: string; decimal?: Decimal };
  asked?: Question[];
  [key: string]: unknown;
}

export interface Measured {
  form?: Form;
  /** What was pasted, to the letter. */
  text?: string;
  columns?: ColumnHint[];
  decimal?: Decimal;
  error_is?: ErrorKind;
  /** Rows left out; a row is a physical line of `text`, from 1. */
  excluded?: { row: number; reason?: string }[];
  /** `offset` is an uncertainty of unknown sign, not a correction. */
  thermometer?: { sd?: Quantity; offset?: Quantity };
  initial_concentration?: Quantity;
  stated_activation_energy?: Quantity;
  /** Form `progress`: what the signal follows. */
  signal_is?: "left" | "formed";
  /** Form `progress`: the signal at the end. */
  end?: "free" | Quantity;
  /** Form `progress`: the signal at the start. */
  start?: "free" | "shared" | Quantity;
  /** Form `progress`: how the error of a signal grows. */
  noise?: "constant" | "proportional";
  /** Form `times`: the quantity gone at each time. */
  extent?: Quantity;
  /** Form `known-law`. */
  activation_energy?: StatedQuantity;
  /** Form `known-law`: the rate constant at `temperature`. */
  rate_constant?: StatedQuantity;
  /** Form `known-law`. */
  temperature?: Quantity;
  /** Form `known-law`: which of its values were not measured. */
  assumed?: string[];
  [key: string]: unknown;
}

export interface Assumed {
  order?: number | "free" | "compare";
  temperature_law?: TemperatureLaw;
  /** The power of T in `arrhenius-with-power`. */
  power?: number;
  scatter?: "automatic" | "from-residuals" | "as-stated" | "as-stated-plus-run-to-run";
  /** Level of the intervals, between 0 and 1. */
  level?: number;
  [key: string]: unknown;
}

/** A blank of a question; a list asks for each of its values. */
export type Blank = Quantity | Quantity[];

export type Bound = "next-run" | "mean";

export type History =
  | {
      start: Quantity;
      segments: ({ hold: Quantity; for: Quantity } | { ramp_to: Quantity; over: Quantity })[];
    }
  | { text: string };

export type Question =
  | { question: "rate-at"; temperature: Blank }
  | { question: "time-to-extent"; temperature: Blank; gone: Blank }
  | { question: "longest-stand"; temperature: Blank; keep: Blank; bound?: Bound }
  | { question: "completion-time"; temperature: Blank; gone: Blank; bound?: Bound }
  | { question: "warmest-storage"; keep: Blank; time: Blank; bound?: Bound }
  | { question: "temperature-for"; gone: Blank; time: Blank }
  | { question: "extent-after"; temperature: Blank; time: Blank }
  | { question: "speed-up"; to: Blank; from: Blank }
  | { question: "equivalent-time"; temperature: Blank; time: Blank; other_temperature: Blank }
  | { question: "along-history"; history: History; keep?: Blank }
  | {
      question: "next-measurement";
      /** Which question it is to serve, from 0. */
      for: number;
      lowest: Quantity;
      highest: Quantity;
      relative_error?: Quantity;
      within?: Quantity;
    }
  | {
      question: "cooling-failure";
      temperature: Blank;
      accumulated?: Blank;
      limit_temperature?: Quantity;
    };

/** Why there is no interval. */
export type WhyNoInterval =
  | "no-scatter-known"
  | "one-sided"
  | "unbounded"
  | "two-rays"
  | "not-converged";

export interface Estimate {
  /** Best estimate, unrounded. */
  value: number;
  standard_error: number | null;
  low: number | null;
  high: number | null;
  level: number;
  unit: string;
  why?: WhyNoInterval;
}

/** Something that could not be used, with its place from 1. */
export interface Problem {
  row?: number;
  column?: number;
  column_name?: string;
  found: string;
  expected: string;
  sentence: string;
}

export interface Column {
  role: Role;
  unit: string | null;
  /** What the numbers as written were multiplied by to count in `unit`. */
  multiplier: number;
  header: string;
  name: string;
  role_from: "stated" | "header" | "values" | "assumed";
  unit_from: "stated" | "header" | "values" | "assumed";
  decimal: Decimal;
  /** For an error: the column it belongs to, from 0. */
  error_of?: number;
  error_is?: ErrorKind;
  signal_is?: "left" | "formed";
  run_temperature?: Quantity;
}

export type Scatter = "none-known" | "from-residuals" | "as-stated" | "as-stated-plus-run-to-run";

export interface Law {
  kind: TemperatureLaw;
  rate_unit: string;
  assumed: string[];
  reference_temperature_kelvin: number;
  ln_rate_at_reference: Estimate;
  activation_energy: Estimate;
  ln_pre_exponential_factor: Estimate;
  pre_exponential_factor: Estimate;
  enthalpy_of_activation: Estimate;
  entropy_of_activation: Estimate | null;
  /** Log-linear law: z in K, and D at the reference temperature in s for first order. */
  z_value?: Estimate;
  d_value?: Estimate;
  /** Of (ln k at the reference temperature, activation energy in J/mol). */
  covariance: number[][] | null;
  degrees_of_freedom: number | null;
  /** How many groups the degrees of freedom count, where runs share one. */
  groups?: number;
  scatter: Scatter;
  run_to_run_sd: number | null;
  mixture: unknown[];
  chi_squared: number | null;
  chi_squared_p: number | null;
  [key: string]: unknown;
}

/** A run; what tells of a curve is there for form `progress` alone. */
export interface Run {
  label: string;
  row: number;
  temperature_kelvin: number;
  rate_constant: Estimate;
  order: number | null;
  /** Residual of ln k. */
  ln_residual: number | null;
  group?: string;
  points?: number;
  residual_sd?: number | null;
  termination?: string;
  start?: number;
  end?: number;
  /** k times the power of the initial concentration that makes it 1/s. */
  reduced_rate_constant?: number;
  extent_followed?: number;
  times_seconds?: number[];
  signals?: number[];
  residuals?: number[];
  [key: string]: unknown;
}

export interface Remark {
  code: string;
  severity: "note" | "caution" | "stop";
  sentence: string;
  remedy: string;
}

export interface Answer {
  question: string;
  /** In a row of a list answer: the blanks that it answers. */
  blanks?: { [name: string]: unknown };
  value: number | null;
  low: number | null;
  high: number | null;
  unit: string | null;
  level: number | null;
  side: "two" | "lower" | "upper" | null;
  grounds: "inside" | "near" | "far" | "beyond" | null;
  rival_low: number | null;
  rival_high: number | null;
  why?: WhyNoInterval;
  sentence: string;
  detail: { [name: string]: unknown };
  rows: Answer[] | null;
  /** Why there is no number, and what would bring one. */
  refused: { reason: string; needs: string } | null;
  [key: string]: unknown;
}

export interface Citation {
  authors: string;
  year: number;
  place: string;
  used_for: string;
}

/** What was found in a study. */
export interface Findings {
  kelvinclock_findings: number;
  read: {
    form: Form;
    decimal: Decimal | null;
    columns: Column[];
    rows_read: number;
    rows_excluded: { row: number; reason: string }[];
    order: number | null;
    scatter: Scatter | null;
    [key: string]: unknown;
  };
  problems: Problem[];
  runs: Run[];
  law: Law | null;
  one_stage: Law | null;
  /** Unranked where too few runs tell the laws apart. */
  rivals: {
    kind: TemperatureLaw;
    order: number | null;
    delta_aicc: number | null;
    weight: number | null;
  }[];
  remarks: Remark[];
  answers: Answer[];
  record: { text: string; citations: Citation[]; version: string; input_sha256: string };
}

/** What is already known about a column; what is absent is inferred. */
export interface ColumnHint {
  role?: Role;
  unit?: string;
  multiplier?: number;
}

/** What is already known about a text. */
export interface Hints {
  columns?: ColumnHint[];
  decimal?: Decimal;
  form?: Form;
}

export interface Cell {
  /** The cell as written, trimmed. */
  text: string;
  kind: "number" | "marked" | "text" | "empty" | "below" | "not-determined" | "bad";
  /** In the unit of the column; of `below`, the limit. */
  value: number | null;
  /** The error within the same cell, in the unit of the column. */
  error: number | null;
}

/** What a text is taken to mean, before anything is computed. */
export interface Table {
  form: Form | null;
  decimal: Decimal;
  columns: Column[];
  /** `row` is a physical line of the text, from 1. */
  rows: { row: number; cells: Cell[] }[];
  problems: Problem[];
  /** What was decided on the writer's behalf. */
  choices: { sentence: string; column?: number }[];
}
