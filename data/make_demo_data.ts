// Makes the demo data of this folder: `deno run --allow-write=data data/make_demo_data.ts`.
// Everything here is invented; see README.md beside this file. The seed is fixed, so the files are the
// same on every machine.

import prand from "pure-rand";

const GAS_CONSTANT = 8.31446261815324;
const SEED = 1717;

/** True values behind the invented ester "E-17", first order throughout. */
const TRUTH = { activationEnergy: 84_000, rateConstantAt60: 2.1e-4 };

/** Error of the water bath from run to run, K; noise of a reading, mmol/L; limit of quantification. */
const BATH_ERROR = 0.05;
const READING_NOISE = 0.03;
const LIMIT_OF_QUANTIFICATION = 0.15;

const generator = prand.xoroshiro128plus(SEED);

/** A normal deviate by the method of Box and Muller. */
function normal(): number {
  const uniform = () => (prand.unsafeUniformIntDistribution(1, 2 ** 31, generator)) / 2 ** 31;
  return Math.sqrt(-2 * Math.log(uniform())) * Math.cos(2 * Math.PI * uniform());
}

function rateConstant(kelvin: number): number {
  const lever = (1 / kelvin - 1 / 333.15) / GAS_CONSTANT;
  return TRUTH.rateConstantAt60 * Math.exp(-TRUTH.activationEnergy * lever);
}

/** A long file: a row a reading, two runs at each of five temperatures. */
function hydrolysis(): string {
  const rows = ["run,temperature [°C],initial E-17 [mmol/L],time [min],E-17 [mmol/L]"];
  const span = { 40: 1500, 50: 540, 60: 210, 70: 84, 80: 36 };
  for (const [celsius, lastMinute] of Object.entries(span)) {
    for (const [letter, initial] of [["a", 5], ["b", 10]] as const) {
      const k = rateConstant(Number(celsius) + 273.15 + BATH_ERROR * normal());
      for (let i = 0; i <= 12; i++) {
        const minutes = Number((lastMinute * i / 12).toFixed(1));
        const reading = initial * Math.exp(-k * 60 * minutes) + READING_NOISE * normal();
        const cell = reading < LIMIT_OF_QUANTIFICATION
          ? `<${LIMIT_OF_QUANTIFICATION}`
          : reading.toFixed(3);
        rows.push(`${celsius}${letter},${celsius},${initial},${minutes},${cell}`);
      }
    }
  }
  return rows.join("\n") + "\n";
}

/** A wide file as a spectrophotometer's spreadsheet exports it: semicolons, decimal commas, a column a
 * run, an end value that nobody waited for. */
function absorbance(): string {
  const runs = [["cell 1", 0.92, 0.061], ["cell 2", 0.88, 0.058]] as const;
  const comma = (value: number, places: number) => value.toFixed(places).replace(".", ",");
  const rows = [
    ["time [min]", ...runs.map(([name]) => `${name} [AU]`)].join(";"),
    ["temperature [°C]", ...runs.map(() => "60,0")].join(";"),
  ];
  const k = rateConstant(333.15);
  for (let minutes = 2; minutes <= 182; minutes += 6) {
    const readings = runs.map(([, start, end]) =>
      comma(end + (start - end) * Math.exp(-k * 60 * minutes) + 0.002 * normal(), 4)
    );
    rows.push([comma(minutes, 1), ...readings].join(";"));
  }
  return rows.join("\r\n") + "\r\n";
}

const folder = new URL("./", import.meta.url);
await Deno.writeTextFile(new URL("e17_hydrolysis.csv", folder), hydrolysis());
await Deno.writeTextFile(new URL("e17_absorbance.csv", folder), absorbance());
