import type { Mm, Point } from "../../drawing/geometry.js";
import { measureText } from "../../drawing/text.js";
import { wrapName } from "../../drawing/wrap-name.js";
import type { ContactUse, Device, Machine, MainUse } from "../../machine/model.js";
import { sparePoles } from "../../machine/terminals.js";
import type { PlacedText } from "../placement.js";
import type { Block, MarginEntry } from "./arrangement.js";
import { around, roomOf } from "./text-box.js";
import { mostLines, textHeight } from "./under-words.js";

/**
 * What stands below the lower rail in the path of a load: its contacts in a table or its valve, then what the path is for. The
 * origin is where the path meets the rail.
 * @param deepest how far down it may reach, mm; a longer table ends with `…`
 */
export function footBlock({ title, load }: MarginEntry, machine: Machine, deepest: Mm): Block {
  const device = load ? machine.devices.get(load.device) : undefined;
  const part = load ? { part: load.id } : {};
  const texts: PlacedText[] = [];
  const strokes: NonNullable<Block["strokes"]> = [];
  const { usual } = textHeight;
  const words = [title, device?.text].filter(
    (text, index, all) => text !== undefined && text !== "" && all.indexOf(text) === index,
  ) as string[];
  const lines = words.flatMap((text) => wrapName(text, usual, widestWords, mostLines));
  const wordsRise = lines.length * linePitch;

  let bottom: Mm = railGap;
  if (load && device?.kind === "solenoid") {
    const room = Math.min(measureText(`${device.valve?.name ?? ""} /88.H8`, usual), widestWords);
    bottom += usual;
    texts.push({
      ...part,
      role: "margin",
      at: { x: middle, y: bottom },
      anchor: "middle",
      height: usual,
      text: { to: "valve", device: device.name, room },
    });
    bottom += usual * 0.3 + blockGap;
  } else if (
    load &&
    device &&
    device.loads[0]?.id === load.id &&
    device.contacts.length + device.mains.length + sparePoles(device).length > 0
  ) {
    const table = contactTable(device, bottom, deepest - bottom - wordsRise - blockGap);
    texts.push(...table.texts.map((text) => ({ ...part, ...text })));
    strokes.push(...table.strokes.map((path) => ({ ...part, role: "table", path, width: 0.18 })));
    bottom += table.height + blockGap;
  }
  lines.forEach((line, index) => {
    const y = bottom + usual + index * linePitch;
    texts.push({ ...part, role: "function", at: { x: middle, y }, anchor: "middle", height: usual, text: line });
  });
  const corners = strokes.flatMap(({ path }) => path.map(({ x, y }) => ({ x, y, width: 0, height: 0 })));
  const boxes = around([...texts.map(roomOf), ...corners]);
  const empty = texts.length === 0;
  return {
    texts,
    strokes,
    above: empty ? 0 : -boxes.x + blockGap,
    below: empty ? 0 : boxes.x + boxes.width + blockGap,
  };
}

/** How far below the rail a block reaches. */
export function depthOf({ texts, strokes = [] }: Block): Mm {
  const corners = strokes.flatMap(({ path }) => path.map(({ x, y }) => ({ x, y, width: 0, height: 0 })));
  const { y, height } = around([...texts.map(roomOf), ...corners]);
  return Math.max(0, y + height);
}

/** From the rail to the block, and between its parts, mm. */
const railGap: Mm = 2.5;
const blockGap: Mm = 1.4;
/** The middle of the block, from the path: under the load and its designation, which stands left of it. */
const middle: Mm = -4;
const widestWords: Mm = 25;
const linePitch: Mm = textHeight.usual * 1.5;

interface ContactTable {
  texts: Omit<PlacedText, "part">[];
  strokes: Point[][];
  height: Mm;
}

const height = textHeight.small;
const rowPitch: Mm = 2.9;
const headHeight: Mm = 4.6;
const pad: Mm = 0.8;

/** The contacts of a coil: main contacts, those that make, those that break, each with its terminals and its place; spare ones have a dash. */
function contactTable(device: Device, top: Mm, deepest: Mm): ContactTable {
  const texts: ContactTable["texts"] = [];
  const strokes: ContactTable["strokes"] = [];
  const spare = sparePoles(device).map(({ form, terminals }) => ({ form, terminals, id: undefined }));
  const mains = device.mains.map((main) => ({ form: "main" as const, terminals: mainsOf(main), id: main.id }));
  const used = device.contacts.map(({ form, terminals, id }) => ({ form, terminals: terminals.value, id }));
  const columns = (["main", "NO", "NC"] as const)
    .map((form) => ({ form, contacts: [...mains, ...used, ...spare].filter((contact) => contact.form === form).sort(byTerminal) }))
    .filter(({ contacts }) => contacts.length > 0)
    .map((column) => {
      const terminals = Math.max(...column.contacts.map((contact) => measureText(written(contact), height)));
      return { ...column, terminals, width: pad + terminals + gap + placeRoom + pad };
    });
  const wanted = Math.max(...columns.map(({ contacts }) => contacts.length));
  const fits = Math.max(1, Math.floor((deepest - headHeight) / rowPitch));
  const shown = Math.min(wanted, fits);
  const tall = headHeight + shown * rowPitch + 0.4;
  const total = columns.reduce((sum, { width }) => sum + width, 0);
  let x = middle - total / 2;
  strokes.push([
    { x, y: top + headHeight },
    { x: x + total, y: top + headHeight },
  ]);
  for (const [index, { form, contacts, terminals, width }] of columns.entries()) {
    if (index > 0)
      strokes.push([
        { x, y: top },
        { x, y: top + tall },
      ]);
    strokes.push(...contactSign(form, { x: x + width / 2, y: top + headHeight / 2 }));
    for (const [row, contact] of contacts.slice(0, shown).entries()) {
      const y = top + headHeight + (row + 1) * rowPitch - 0.4;
      const say = (at: Mm, text: PlacedText["text"]) => texts.push({ role: "margin", at: { x: at, y }, anchor: "start", height, text });
      if (row === shown - 1 && contacts.length > shown) {
        say(x + pad, "…");
        continue;
      }
      say(x + pad, written(contact));
      const place = x + pad + terminals + gap;
      if (contact.id === undefined) say(place, "–");
      else say(place, { to: "contact-place", device: device.name, contact: contact.id, room: placeRoom });
    }
    x += width;
  }
  return { texts, strokes, height: tall };
}

const gap: Mm = 1.2;
/** Room for the place of a contact. */
const placeRoom: Mm = measureText("/88.88", height);

/** The sign of a make or break contact at the head of its column. */
function contactSign(form: ContactUse["form"] | "main", { x, y }: Point): Point[][] {
  const at = (dx: Mm, dy: Mm): Point => ({ x: x + dx, y: y + dy });
  // Three poles side by side stand for main contacts.
  if (form === "main") return [-1.6, 0, 1.6].flatMap((by) => contactSign("NO", at(by, 0)));
  const lower = [at(0, 1.9), at(0, 0.9), form === "NO" ? at(-0.9, -0.9) : at(0.8, -1.1)];
  const upper = form === "NO" ? [at(0, -1.9), at(0, -0.9)] : [at(0, -1.9), at(0, -0.9), at(0.9, -0.9)];
  return [lower, upper];
}

/** From the first terminal to the last: `1-6`. */
const mainsOf = ({ ins, outs }: MainUse): [string, string] => [ins[0]?.terminal ?? "", outs.at(-1)?.terminal ?? ""];

interface TableContact {
  terminals: readonly [string, string];
}

/** A contact's terminals as they are written, `13-14`; empty when it has none. */
function written({ terminals }: TableContact): string {
  const printed = terminals.join("-");
  return printed === "-" ? "" : printed;
}

/** In the order in which they sit in the device, as far as their numbers say. */
function byTerminal({ terminals: [a] }: TableContact, { terminals: [b] }: TableContact): number {
  return /^\d+$/.test(a) && /^\d+$/.test(b) ? Number(a) - Number(b) : 0;
}
