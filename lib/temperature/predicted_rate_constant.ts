import { type Caution, formatCaution } from "../quantity/caution.ts";
import { Estimate, type EstimateInput, type EstimateJson } from "../quantity/estimate.ts";
import { EVIDENCE_MEDIA_TYPE } from "../quantity/result.ts";
import { escapeHtml } from "../quantity/section_html.ts";

/** A rate constant at a temperature, from a fitted temperature law, with what its user must know. */
export class PredictedRateConstant extends Estimate {
  /** Temperature, K. */
  readonly temperature: number;
  /** How far outside the tested range, and what follows. */
  readonly cautions: readonly Caution[];

  /** A prediction; `ArrheniusFit.rateConstantAt` makes it.
   *
   * @param input the estimate @param temperature K @param cautions what its user must know */
  constructor(input: EstimateInput, temperature: number, cautions: readonly Caution[]) {
    super(input);
    this.temperature = temperature;
    this.cautions = cautions;
  }

  /** The prediction in another unit; the cautions stay with it. */
  override in(unit: string): PredictedRateConstant {
    const converted = super.in(unit);
    return new PredictedRateConstant(converted, this.temperature, this.cautions);
  }

  /** Plain data, cautions included. */
  override toJSON(): EstimateJson & { temperature: number; cautions: readonly Caution[] } {
    return { ...super.toJSON(), temperature: this.temperature, cautions: this.cautions };
  }

  /** What `console.log` prints: the estimate, then each caution on a line. */
  [Symbol.for("Deno.customInspect")](): string {
    return [this.toString(), ...this.cautions.map(formatCaution)].join("\n");
  }

  /** What a notebook shows. */
  [Symbol.for("Jupyter.display")](): Record<string, string> {
    const title = `k(${this.temperature} K) = ${this.toString()}`;
    const bundle: Record<string, unknown> = {
      "text/plain": [title, ...this.cautions.map(formatCaution)].join("\n"),
      "text/html": `<p>${escapeHtml(title)}</p>` +
        this.cautions.map((caution) =>
          `<p class="caution ${caution.severity}"><strong>${
            escapeHtml(formatCaution(caution))
          }</strong></p>`
        ).join(""),
      [EVIDENCE_MEDIA_TYPE]: {
        kind: "predicted-rate-constant",
        title,
        cautions: this.cautions,
        data: this.toJSON(),
      },
    };
    return bundle as Record<string, string>;
  }
}
