import type { Device } from "../../machine/model.js";
import type { Symbol } from "../../symbols/symbol.js";
import { withTexts } from "../../symbols/with-texts.js";
import { textHeight } from "./under-words.js";

/**
 * The symbol with the rail named at its third lead: a sensor of three wires is fed from both rails, its third terminal going
 * to the return (terminal 3, IEC 60947-5-2, from memory); a lamp's test contact is fed from the live rail.
 * @param rails the live and the return rail
 */
export function nameThirdLead(symbol: Symbol, device: Device | undefined, [live, back]: [string, string]): Symbol {
  if (!device || !symbol.spots["third-rail"]) return symbol;
  const lamp = device.kind === "pilot-light";
  return withTexts(symbol, { "third-rail": lamp ? live : back, ...(lamp ? {} : { "third-terminal": "3" }) }, textHeight.small);
}
