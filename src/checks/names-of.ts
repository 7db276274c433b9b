import type { DeviceUse } from "../machine/model.js";
import { coilOf, designationOf } from "../machine/walk.js";
/** What a use is called in the text: `/CR1`, `S1.auto`, `X1:4`, `KL1.set`. */
export function nameOf(use: DeviceUse): string {
  if (use.kind === "load") return coilOf(use);
  if (use.kind === "through") return designationOf(use);
  const position = use.position === undefined ? "" : `.${use.position}`;
  return `${use.form === "NC" ? "/" : ""}${designationOf(use)}${position}`;
}
