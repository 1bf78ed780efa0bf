/** Length of one sample as an exact ratio of seconds. */
export interface SampleInterval {
  readonly numerator: bigint;
  readonly denominator: bigint;
}

const PREFIXES: Readonly<Record<string, number>> = { '': 0, k: 3, K: 3, m: 6, M: 6, g: 9, G: 9 };
const TIME_UNITS: Readonly<Record<string, number>> = {
  s: 0,
  sec: 0,
  ms: 3,
  us: 6,
  µs: 6,
  μs: 6,
  ns: 9,
  ps: 12,
};

/**
 * A decimal number as an exact ratio; null where the text is none. Accepts a decimal comma. `hasGroups`: digits stand in groups of
 * three, `50,000` is fifty thousand.
 */
export function parseRatio(text: string, hasGroups = false): SampleInterval | null {
  let plain = text.trim().replace(/[ _'](?=\d{3}(\D|$))/g, '');
  if (/^\d{1,3}([.,]\d{3}){2,}$/.test(plain) || hasGroups) plain = plain.replace(/[,.](?=\d{3}(\D|$))/g, '');
  else if (/^\d{1,3}(,\d{3})+\.\d+$/.test(plain)) plain = plain.replace(/,/g, '');
  else plain = plain.replace(',', '.');
  const [, whole, fraction = '', exponent = '0'] =
    /^\+?(\d*)(?:\.(\d*))?(?:e([+-]?\d{1,2}))?$/i.exec(plain) ?? [];
  if (whole === undefined || whole + fraction === '' || plain.length > 60) return null;
  const shift = Number(exponent) - fraction.length;
  const digits = BigInt(whole + fraction);
  if (digits === 0n) return null;
  return shift >= 0
    ? { numerator: digits * 10n ** BigInt(shift), denominator: 1n }
    : { numerator: digits, denominator: 10n ** BigInt(-shift) };
}

/** The interval of a rate given in hertz. */
export function intervalOfRate(hertz: number): SampleInterval | null {
  const ratio = Number.isFinite(hertz) && hertz > 0 ? parseRatio(String(hertz)) : null;
  return ratio === null ? null : { numerator: ratio.denominator, denominator: ratio.numerator };
}

const NUMBER = String.raw`(\+?(?:\d+(?:[ _']\d{3}(?!\d))*(?:[.,]\d+)*|[.,]\d+)(?:e[+-]?\d+)?)`;
const GAP = String.raw`[\s"]*[:=,;|\t]?[\s"]*`;
const RATE = new RegExp(
  String.raw`(?:sampl\w*|abtast\w*|mess|acquisition|data)[\s_-]*(?:rate|freq\w*|clock|takt)|abtastrate|abtastfrequenz|samples?[\s_]*(?:per|\/)[\s_]*s\w*|\bsps\b|\bfs\b`,
  'i',
);
const INTERVAL = new RegExp(
  String.raw`(?:sampl\w*|abtast\w*|mess|time|zeit|x|horizontal)?[\s_-]*(?:interval\w*|period\w*|increment|resolution|step|schritt\w*|raster)|\bdelta[\s_-]*[tx]\b|\bd[tx]\b|\bsample[\s_-]*time\b|abtastzeit`,
  'i',
);
const RATE_UNIT = String.raw`\s*([kKmMgG])?\s*(Hz|Hertz|Sa?\/s\w*|sps|samples?\s*(?:\/|per)\s*s\w*)`;
const TIME_UNIT = String.raw`[\s",;|]*(ms|us|µs|μs|ns|ps|sec|s)\b`;

/**
 * Looks in a line of preamble or comment for a sample rate or interval: `Sample rate: 50 kHz`, `# interval 20 us`,
 * `Abtastrate [kHz];50`, `Sample Interval,2.0E-05`. Null where there is none.
 */
export function findStatedInterval(text: string): SampleInterval | null {
  const rate = RATE.exec(text);
  if (rate !== null) return findRate(text.slice(rate.index + rate[0].length));
  const interval = INTERVAL.exec(text);
  if (interval !== null) return findInterval(text.slice(interval.index + interval[0].length));
  const bare = new RegExp(NUMBER + String.raw`\s*([kKMG])?(Hz|Sa?\/s|sps)\b`).exec(text);
  return bare === null ? null : findRate(bare[0]);
}

function findRate(rest: string): SampleInterval | null {
  const [, labelPrefix = ''] =
    new RegExp(String.raw`^[\s_]*[[(]\s*([kKmMgG]?)(?:Hz|Sa?\/s|sps)\s*[\])]`).exec(rest) ?? [];
  const after = rest.replace(/^[\s_]*[[(][^\])]*[\])]/, '');
  const found = new RegExp('^' + GAP + NUMBER + `(?:${RATE_UNIT})?`, 'i').exec(after);
  if (found === null) return null;
  const exponent = PREFIXES[found[2] ?? labelPrefix] ?? 0;
  const ratio = parseRatio(found[1], exponent === 0 && isGrouped(found[1]));
  if (ratio === null) return null;
  return { numerator: ratio.denominator, denominator: ratio.numerator * 10n ** BigInt(exponent) };
}

/** `50,000 Hz` has a comma for thousands, and so has the point in `50.000 Hz`: no line is sampled fifty times a second. */
function isGrouped(number: string): boolean {
  return /^\d{1,3}[,.]\d{3}$/.test(number.trim());
}

function findInterval(rest: string): SampleInterval | null {
  const [, labelUnit = 's'] =
    new RegExp(String.raw`^[\s_]*[[(]\s*(ms|us|µs|μs|ns|ps|s)\s*[\])]`).exec(rest) ?? [];
  const after = rest.replace(/^[\s_]*[[(][^\])]*[\])]/, '');
  const found = new RegExp('^' + GAP + NUMBER + `(?:${TIME_UNIT})?`, 'i').exec(after);
  const ratio = found === null ? null : parseRatio(found[1]);
  if (found === null || ratio === null) return null;
  const exponent = TIME_UNITS[(found[2] ?? labelUnit).toLowerCase()] ?? 0;
  return { numerator: ratio.numerator, denominator: ratio.denominator * 10n ** BigInt(exponent) };
}
