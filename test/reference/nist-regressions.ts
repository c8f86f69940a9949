import { readFileSync } from "node:fs";

/** One of NIST's non-linear regressions: data, two starts, certified results. */
export interface NistRegression {
  y: number[];
  /** A row per observation. */
  x: number[][];
  starts: [number[], number[]];
  certified: number[];
  certifiedSd: number[];
  residualSumOfSquares: number;
}

/** Reads data/nist/NAME.dat; sections lie where the file's head says. */
export function nistRegression(name: string): NistRegression {
  const text = readFileSync(new URL(`./data/nist/${name}.dat`, import.meta.url), "latin1");
  const lines = text.split(/\r?\n/);
  const data = section(lines, /^\s+Data\s+\(lines\s+(\d+)\s+to\s+(\d+)\)/).map(numbersOf);
  const parameters = section(lines, /Starting Values\s+\(lines\s+(\d+)\s+to\s+(\d+)\)/i)
    .map((line) => numbersOf(line.slice(line.indexOf("=") + 1)))
    .filter((row) => row.length === 4);
  const sum = /Residual Sum of Squares:\s+(\S+)/.exec(text);
  if (sum === null) throw new Error(`${name}.dat has no residual sum of squares`);
  return {
    y: data.map((row) => row[0]!),
    x: data.map((row) => row.slice(1)),
    starts: [parameters.map((row) => row[0]!), parameters.map((row) => row[1]!)],
    certified: parameters.map((row) => row[2]!),
    certifiedSd: parameters.map((row) => row[3]!),
    residualSumOfSquares: Number(sum[1]),
  };
}

function section(lines: string[], head: RegExp): string[] {
  const found = lines.map((line) => head.exec(line)).find((match) => match !== null);
  if (found === undefined) throw new Error(`no section like ${head.source}`);
  return lines.slice(Number(found[1]) - 1, Number(found[2])).filter((line) => line.trim() !== "");
}

function numbersOf(line: string): number[] {
  return line.trim().split(/\s+/).map(Number);
}

type Model = (b: Float64Array, x: number[]) => number;

const rational =
  (top: number, bottom: number): Model =>
  (b, [x]) => {
    let numerator = 0;
    for (let k = top; k >= 0; k -= 1) numerator = numerator * x! + b[k]!;
    let denominator = 0;
    for (let k = bottom; k >= 1; k -= 1) denominator = (denominator + b[top + k]!) * x!;
    return numerator / (1 + denominator);
  };

const exponentials: Model = (b, [x]) =>
  b[0]! * Math.exp(-b[1]! * x!) + b[2]! * Math.exp(-b[3]! * x!) + b[4]! * Math.exp(-b[5]! * x!);

const peaks: Model = (b, [x]) =>
  b[0]! * Math.exp(-b[1]! * x!) +
  b[2]! * Math.exp(-(((x! - b[3]!) / b[4]!) ** 2)) +
  b[5]! * Math.exp(-(((x! - b[6]!) / b[7]!) ** 2));

const chwirut: Model = (b, [x]) => Math.exp(-b[0]! * x!) / (b[1]! + b[2]! * x!);
const saturation: Model = (b, [x]) => -b[0]! * Math.expm1(-b[1]! * x!);

const wave = (x: number, period: number, c: number, s: number): number =>
  c * Math.cos((2 * Math.PI * x) / period) + s * Math.sin((2 * Math.PI * x) / period);

/** The models as the files state them. */
export const nistModels: Record<string, Model> = {
  Bennett5: (b, [x]) => b[0]! * (b[1]! + x!) ** (-1 / b[2]!),
  BoxBOD: saturation,
  Chwirut1: chwirut,
  Chwirut2: chwirut,
  DanWood: (b, [x]) => b[0]! * x! ** b[1]!,
  ENSO: (b, [x]) =>
    b[0]! +
    wave(x!, 12, b[1]!, b[2]!) +
    wave(x!, b[3]!, b[4]!, b[5]!) +
    wave(x!, b[6]!, b[7]!, b[8]!),
  Eckerle4: (b, [x]) => (b[0]! / b[1]!) * Math.exp(-0.5 * ((x! - b[2]!) / b[1]!) ** 2),
  Gauss1: peaks,
  Gauss2: peaks,
  Gauss3: peaks,
  Hahn1: rational(3, 3),
  Kirby2: rational(2, 2),
  Lanczos1: exponentials,
  Lanczos2: exponentials,
  Lanczos3: exponentials,
  MGH09: (b, [x]) => (b[0]! * (x! * x! + x! * b[1]!)) / (x! * x! + x! * b[2]! + b[3]!),
  MGH10: (b, [x]) => b[0]! * Math.exp(b[1]! / (x! + b[2]!)),
  MGH17: (b, [x]) => b[0]! + b[1]! * Math.exp(-x! * b[3]!) + b[2]! * Math.exp(-x! * b[4]!),
  Misra1a: saturation,
  Misra1b: (b, [x]) => b[0]! * (1 - (1 + (b[1]! * x!) / 2) ** -2),
  Misra1c: (b, [x]) => b[0]! * (1 - (1 + 2 * b[1]! * x!) ** -0.5),
  Misra1d: (b, [x]) => (b[0]! * b[1]! * x!) / (1 + b[1]! * x!),
  Nelson: (b, [x1, x2]) => b[0]! - b[1]! * x1! * Math.exp(-b[2]! * x2!),
  Rat42: (b, [x]) => b[0]! / (1 + Math.exp(b[1]! - b[2]! * x!)),
  Rat43: (b, [x]) => b[0]! / (1 + Math.exp(b[1]! - b[2]! * x!)) ** (1 / b[3]!),
  Roszman1: (b, [x]) => b[0]! - b[1]! * x! - Math.atan(b[2]! / (x! - b[3]!)) / Math.PI,
  Thurber: rational(3, 3),
};

type Derivatives = (b: Float64Array, x: number[]) => number[];

const exponentialDerivatives: Derivatives = (b, [x]) =>
  [0, 2, 4].flatMap((k) => {
    const e = Math.exp(-b[k + 1]! * x!);
    return [e, -b[k]! * x! * e];
  });

const saturationDerivatives: Derivatives = (b, [x]) => [
  -Math.expm1(-b[1]! * x!),
  b[0]! * x! * Math.exp(-b[1]! * x!),
];

/** Derivatives by the parameters, by hand, of the models whose valleys are the most curved. */
export const nistDerivatives: Record<string, Derivatives> = {
  Bennett5: (b, [x]) => {
    const y = b[0]! * (b[1]! + x!) ** (-1 / b[2]!);
    return [y / b[0]!, -y / b[2]! / (b[1]! + x!), (y * Math.log(b[1]! + x!)) / b[2]! ** 2];
  },
  BoxBOD: saturationDerivatives,
  Lanczos1: exponentialDerivatives,
  Lanczos2: exponentialDerivatives,
  Lanczos3: exponentialDerivatives,
  MGH10: (b, [x]) => {
    const d = x! + b[2]!;
    const e = Math.exp(b[1]! / d);
    return [e, (b[0]! * e) / d, (-b[0]! * e * b[1]!) / d ** 2];
  },
  MGH17: (b, [x]) => {
    const [e, f] = [Math.exp(-x! * b[3]!), Math.exp(-x! * b[4]!)];
    return [1, e, f, -b[1]! * x! * e, -b[2]! * x! * f];
  },
  Misra1a: saturationDerivatives,
};
