import type { DrawingSet } from "../drawing/marks.js";
import { naturalOrder } from "../machine/natural-order.js";
import { lineWord, nameOf } from "../schedules/place-words.js";
import type { Appearances } from "./appearances.js";
import { terminalsOf } from "./appearances.js";

/** Devices and fluid components with where they are drawn, for a reader who looks for one of them. */
export function outlineOf(appearances: Appearances): DrawingSet["outline"] {
  const { machine } = appearances;
  const names = [...new Set([...machine.devices.keys(), ...machine.components.keys()])].sort(naturalOrder);
  return names.flatMap((name) => {
    const device = machine.devices.get(name);
    const title = device?.text || machine.components.get(name)?.text || "";
    const load = appearances.loadOf(name);
    const component = appearances.component(name);
    const fluid = device ? appearances.fluidSideOf(name) : undefined;
    const contacts = appearances.contactsOf(name);
    const home = load?.part ?? component?.part ?? contacts[0]?.part ?? fluid?.part;
    if (home === undefined) return [];
    const uses = contacts.map(({ part, place, contact }) => ({
      title: [
        `${contact.form} ${terminalsOf(contact)}`.trim(),
        `sheet ${place.sheet}`,
        place.line === undefined ? "" : `${lineWord(machine.drawing.convention)} ${place.line}`,
      ]
        .filter((word) => word !== "")
        .join(", "),
      part,
    }));
    if (fluid && fluid.part !== home) {
      const { sheet, zone } = fluid.place;
      uses.push({
        title: [`on sheet ${sheet}`, zone === "" ? "" : `zone ${zone}`].filter((word) => word !== "").join(", "),
        part: fluid.part,
      });
    }
    return [{ device: nameOf(name, machine), title, home, uses }];
  });
}
