/** What the command `infer` puts into `results`. */
import type { Inference } from "../inference/infer.ts";

/** `results` of the command `infer`. */
export type InferResults = Omit<Inference, "warnings">;
