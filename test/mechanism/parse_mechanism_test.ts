import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { MechanismSyntaxError } from "../../lib/mechanism/mechanism_syntax_error.ts";
import { mechanism, parseMechanism } from "../../lib/mechanism/parse_mechanism.ts";
import { molecularity } from "../../lib/mechanism/elementary_step.ts";

function faultsOf(text: string): string[] {
  try {
    parseMechanism(text);
  } catch (error) {
    if (!(error instanceof MechanismSyntaxError)) throw error;
    return error.faults.map((f) => `${f.line}:${f.column} ${f.message}`);
  }
  return [];
}

describe("a step is read", () => {
  test.each([
    ["A -> B", "A ->[k1] B"],
    ["A → B", "A ->[k1] B"],
    ["A <=> B", "A <=>[k1][k-1] B"],
    ["A ⇌ B", "A <=>[k1][k-1] B"],
    ["A->B", "A ->[k1] B"],
    ["X2 <=>[kd][kr] 2 X", "X2 <=>[kd][kr] 2 X"],
    ["2A -> B", "2 A ->[k1] B"],
    ["A + A -> B", "2 A ->[k1] B"],
    ["∅ -> A", "∅ ->[k1] A"],
    ["A -> ∅", "A ->[k1] ∅"],
    ["A + M -> 2 B + M", "A + M ->[k1] 2 B + M"],
    ["A + hv -> B", "A + hν ->[k1] B"],
    ["A -> B + hν", "A ->[k1] B + hν"],
    ["Fe^3+ + 2 I- -> Fe^2+ + I2·-", "Fe^3+ + 2 I- ->[k1] Fe^2+ + I2·-"],
    ["H++OH- -> H2O(l)", "H+ + OH- ->[k1] H2O(l)"],
    ["H+(aq) + OH-(aq) -> H2O(l)", "H+(aq) + OH-(aq) ->[k1] H2O(l)"],
    ["Br--> X", "Br- ->[k1] X"],
    ["Br- -> X", "Br- ->[k1] X"],
    ["Br• -> Br2", "Br· ->[k1] Br2"],
    ["[Fe(CN)6]^4- -> [Fe(CN)6]^3- + e-", "[Fe(CN)6]^4- ->[k1] [Fe(CN)6]^3- + e-"],
    ["A ->[k1] [Fe(CN)6]^4-", "A ->[k1] [Fe(CN)6]^4-"],
    ["2-propanol -> 1,3-diene", "2-propanol ->[k1] 1,3-diene"],
    ["A+B -> C", "A + B ->[k1] C"],
    ["HC#CH -> A # the first # is a bond", "HC#CH ->[k1] A"],
    ["# only this\n\n A -> B # slow", "A ->[k1] B"],
  ])("%s", (text, expected) => {
    expect(String(parseMechanism(text))).toBe(expected);
  });

  test("species and symbols come in the order of their first use, M and light are no species", () => {
    const m = mechanism`
      B + M <=> A + M
      A + hν ->[kp] C + B
      C ->[kp] D`;
    expect(m.species).toEqual(["B", "A", "C", "D"]);
    expect(m.rateConstants).toEqual(["k1", "k-1", "kp"]);
    expect(m.steps.map((step) => step.line)).toEqual([2, 3, 4]);
    expect(m.steps.map(molecularity)).toEqual([2, 1, 1]);
    expect(m.steps.map((step) => step.light)).toEqual([undefined, "absorbed", undefined]);
  });

  test("values in the tag are put in as text", () => {
    expect(String(mechanism`A ->[${"kx"}] ${2} B`)).toBe("A ->[kx] 2 B");
  });
});

describe("faults are said with place and fix", () => {
  test.each([
    ["A = B", `1:3 expected "->" or "<=>", found "="`],
    ["A => B", `1:3 expected "->" or "<=>", found "=>"`],
    ["A <-> B", `1:3 expected "->" or "<=>", found "<->"`],
    ["A B -> C", `1:3 expected "+" or an arrow, found "B"`],
    ["0.5 O2 -> O", `1:1 an elementary step has whole stoichiometric numbers, found "0.5"`],
    ["0 A -> B", `1:1 expected a stoichiometric number of 1 or more, found "0"`],
    ["A -> ", `1:5 expected a species, found an empty side; write ∅`],
    ["A -> B +", `1:9 expected a species after "+", found nothing`],
    ["+ A -> B", `1:1 expected a species before "+"`],
    ["A ->[3] B", `1:6 expected a rate-constant symbol such as k1, found "3"`],
    ["A ->[k B", `1:5 expected "]"`],
    ["A ->[a][b] B", `1:9 expected one rate-constant symbol on "->", found 2`],
    ["A <=>[k1] B", `1:7 expected two rate-constant symbols`],
    ["A -> B -> C", `1:8 expected one arrow, found a second one "->"`],
    ["A -> B; B -> C", `1:7 expected "+" or an arrow, found ";"`],
    ["A + B + C + D -> E", `1:15 at most 3 particles react in one elementary step, found 4`],
    ["A + M -> B", `1:7 expected the third body M once on both sides, found 1 on the left and 0`],
    ["A <=> B + hν", `1:3 a step with light runs one way`],
    ["A + ∅ -> B", `1:1 expected ∅ alone on its side`],
    ["∅ -> ∅", `1:3 expected a species on one side at least`],
    ["A + B -> B + A", `1:7 both sides are the same`],
    ["X", `1:1 expected an arrow, found none in "X"`],
    ["", `1:1 expected an elementary step`],
    [
      "A -> B\nB ->[k1] C",
      `1:3 step 1 has no symbol and would be "k1", which is written on step 2`,
    ],
  ])("%s", (text, expected) => {
    expect(faultsOf(text).some((fault) => fault.startsWith(expected)), faultsOf(text).join("\n"))
      .toBe(true);
  });

  test("all of them at once, in reading order", () => {
    const text = "A -> B\nB = C\n\nC D -> E\n2,5 E -> F";
    expect(faultsOf(text).map((fault) => fault.split(" ")[0])).toEqual(["2:3", "4:3", "5:1"]);
    try {
      parseMechanism(text);
      expect.unreachable();
    } catch (error) {
      expect(error).toBeInstanceOf(SyntaxError);
      expect(error).toMatchObject({ line: 2, column: 3, name: "MechanismSyntaxError" });
      expect((error as Error).message).toContain("Cannot parse the mechanism: 3 faults\n");
    }
  });

  test("what is no text", () => {
    expect(() => parseMechanism(3 as unknown as string)).toThrow(TypeError);
  });
});

test("the notation of any mechanism reads to the same steps", () => {
  const name = fc.constantFrom("A", "Fe^3+", "OH-", "Br·", "[Cu(NH3)4]^2+", "H2O(l)", "ES", "x'");
  const side = fc.uniqueArray(name, { minLength: 1, maxLength: 3 });
  const step = fc.record({ left: side, right: side, both: fc.boolean(), body: fc.boolean() });
  fc.assert(fc.property(fc.array(step, { minLength: 1, maxLength: 6 }), (steps) => {
    const text = steps.map(({ left, right, both, body }) => {
      const m = body ? " + M" : "";
      const sides = [left.slice(0, 2), right.slice(0, 2)].map((s) => s.join(" + ") + m);
      return `${sides[0]} ${both ? "⇌" : "→"} ${sides[1]}`;
    }).filter((line) => {
      const [l, r] = line.split(/ [⇌→] /).map((s) => s.split(" + ").sort().join());
      return l !== r;
    }).join("\n");
    fc.pre(text !== "");
    const read = parseMechanism(text);
    const again = parseMechanism(String(read));
    expect(again.steps.map((s) => ({ ...s, line: 0 })))
      .toEqual(read.steps.map((s) => ({ ...s, line: 0 })));
    expect(String(again)).toBe(String(read));
  }));
});
