/** Unit words as exports spell them → SI unit and power of ten. */

export interface Unit {
  /** Without SI prefix: "V", "A", "s", "Hz", "dB"… */
  symbol: string;
  factor: number;
}

const cyrillic: Record<string, string> = {
  с: "s",
  мс: "ms",
  мкс: "us",
  нс: "ns",
  В: "V",
  мВ: "mV",
  кВ: "kV",
  А: "A",
  мА: "mA",
  Гц: "Hz",
};

const prefixes: Record<string, number> = {
  T: 1e12,
  G: 1e9,
  M: 1e6,
  k: 1e3,
  K: 1e3,
  m: 1e-3,
  u: 1e-6,
  µ: 1e-6,
  μ: 1e-6,
  n: 1e-9,
  p: 1e-12,
  f: 1e-15,
};

// Spelled-out names in the languages exports are often found in.
const words: [RegExp, string][] = [
  [/^(volts?|voltios?|volty|вольт)$/i, "V"],
  [/^(amp|amps|amperes?|ampères?|amperios?)$/i, "A"],
  [/^(s|sec|secs|seconds?|sekunden?|secondes?|segundos?|secondi|секунд[аы]?|秒)$/i, "s"],
  [/^(hz|hertz)$/i, "Hz"],
  [/^(ohms?|Ω|Ω)$/i, "ohm"],
  [/^(watts?)$/i, "W"],
  [/^(db[a-zµ]*)$/i, "dB"],
  [/^(°c|degc|celsius|℃)$/i, "°C"],
  [/^(deg|degrees?|°)$/i, "°"],
  [/^(%|percent)$/i, "%"],
];
const spelledPrefixes: [RegExp, number][] = [
  [/^giga/i, 1e9],
  [/^mega/i, 1e6],
  [/^kilo/i, 1e3],
  [/^milli/i, 1e-3],
  [/^mikro|^micro/i, 1e-6],
  [/^nano/i, 1e-9],
  [/^pi[ck]o/i, 1e-12],
];
const symbols = ["V", "A", "s", "Hz", "W", "J", "F", "H", "N", "T", "Pa", "ohm", "C"];

// Powers of ten are divided where that rounds better than a product would.
export const scaleBy = (value: number, factor: number) =>
  factor < 1 ? value / Math.round(1 / factor) : value * factor;

/** null where the text is no unit. `time` settles S, mS and MS in favour of seconds. */
export function readUnit(text: string, time = false): Unit | null {
  const bare = text.trim().replace(/^[([{<]\s*(.*?)\s*[)\]}>]$/, "$1");
  const word = cyrillic[bare] ?? bare;
  if (word === "" || word.length > 16) return null;
  return bySymbol(word) ?? byWord(word, 1) ?? bySpelledPrefix(word) ?? (time ? timeLike(word) : null);
}

function bySymbol(word: string): Unit | null {
  if (symbols.includes(word)) return { symbol: word, factor: 1 };
  const rest = word.slice(1);
  const factor = prefixes[word[0]];
  if (factor === undefined) return null;
  if (symbols.includes(rest) && rest !== "C") return { symbol: rest, factor };
  return byWord(rest, factor, /^(sec|secs|hz|volts?|amps?|ohms?|Ω|Ω)$/i);
}

function byWord(word: string, factor: number, only?: RegExp): Unit | null {
  if (only && !only.test(word)) return null;
  const match = words.find(([pattern]) => pattern.test(word));
  return match && (word !== "S" || factor === 1) ? { symbol: match[1], factor } : null;
}

function bySpelledPrefix(word: string): Unit | null {
  for (const [pattern, factor] of spelledPrefixes) {
    if (!pattern.test(word)) continue;
    const base = words.find(([name]) => name.test(word.replace(pattern, "")));
    if (base) return { symbol: base[1], factor };
  }
  return null;
}

function timeLike(word: string): Unit | null {
  const match = /^([munpµμ])s(ec)?$/i.exec(word);
  return match ? { symbol: "s", factor: prefixes[match[1].toLowerCase()] } : null;
}

export interface NamedUnit {
  name: string;
  /** As the file spells it. */
  spelled: string | null;
  unit: Unit | null;
}

/** A name with its unit inside: "Time [s]", "A (mV)", "A in V", "Time / s", "U_V". */
export function splitName(cell: string): NamedUnit {
  // A quoted name may run over lines.
  const text = cell.trim().replace(/\s*[\r\n]+\s*/g, " ");
  const patterns = [
    /^(.*?)\s*[[({]\s*([^\])}]*?)\s*[\])}]\s*$/,
    /^(?:(.*?)\s+)?in\s+(\S+)$/i,
    /^(.*?)\s*\/\s*(\S+)$/,
    /^(.*?)_(\S+)$/,
    /^(.*?)\s*,\s*(\S+)$/,
    /^(time|zeit|temps|tiempo|tempo)\s+(\S+)$/i,
  ];
  for (const pattern of patterns) {
    const match = pattern.exec(text);
    if (!match) continue;
    const [, name = "", inside] = match;
    const time = timeName.test(name);
    const unit = readUnit(inside, time) ?? (name === "" ? readUnit(inside, true) : null);
    if (unit) return { name: name.trim(), spelled: inside.trim(), unit };
    if (pattern === patterns[0] && inside.length <= 8 && /^[^\d]+$/.test(inside) && name !== "") {
      const symbol = inside.trim();
      return { name: name.trim(), spelled: symbol, unit: { symbol, factor: 1 } };
    }
  }
  return { name: text, spelled: null, unit: null };
}

/** Names of a time axis, in the languages exports are often found in. */
export const timeName =
  /^(#\s*)?(t|time|times|zeit|temps|tiempo|tempo|tid|tijd|czas|aika|čas|idő|время|时间|時間|시간|x|x[ _-]?axis|timestamp|time[ _-]?(axis|stamp|base|value)?s?|elapsed( time)?|relative time|second|seconds|sec|secs|s)\s*\d*$/i;
