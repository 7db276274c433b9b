import type { Layout } from "../layout/placement.js";
import type { Machine } from "../machine/model.js";
import { contactList } from "./contact-list.js";
import { deviceList } from "./device-list.js";
import type { ListName } from "./list-names.js";
import { linePlace, zonePlace } from "./place-words.js";
import { type DrawnAt, printedPoles } from "./rows.js";
import { terminalList } from "./terminal-list.js";
import { wireList } from "./wire-list.js";

/** A list ready to be printed or handed to other programs. */
export interface List {
  heads: readonly string[];
  /** Flat records under the heads. */
  records: (string | number)[][];
  /** How many cells at the beginning of a record speak of the same thing as those of the record before where they are alike. */
  shared: number;
  /** The rows themselves, the same keys in the same order whatever made them. */
  data: readonly object[];
}

/** Makes each list from a machine with its wires numbered and where its parts stand. */
export const listMakers: Record<ListName, (machine: Machine, layout: Layout) => List> = {
  devices: (machine, layout) => {
    const rows = deviceList(machine, layout);
    return {
      heads: ["designation", "kind", "text", "order code", "location", "ratings", "drawn"],
      records: rows.map(({ designation, kind, text, orderCode, location, ratings, drawn }) => [
        designation,
        kind,
        text,
        orderCode,
        location,
        ratings.join(", "),
        places(drawn, machine),
      ]),
      shared: 0,
      data: rows,
    };
  },

  wires: (machine) => {
    const rows = wireList(machine);
    return {
      heads: ["wire", "colour", "name", "from", "to"],
      records: rows.flatMap(({ number, colour, name, pins, connections }) => {
        const own = [number, colour, name];
        if (connections.length === 0) return [[...own, pins[0] ?? "", ""]];
        return connections.map(({ from, to }) => [...own, from, to]);
      }),
      shared: 3,
      data: rows,
    };
  },

  terminals: (machine, layout) => {
    const rows = terminalList(machine, layout);
    return {
      heads: ["strip", "terminal", "wire", "before", "after", "drawn"],
      records: rows.map(({ strip, terminal, wire, before, after, drawn }) => [
        strip,
        terminal,
        wire,
        before.join(", "),
        after.join(", "),
        places(drawn, machine),
      ]),
      shared: 1,
      data: rows,
    };
  },

  contacts: (machine, layout) => {
    const rows = contactList(machine, layout);
    return {
      heads: ["device", "kind", "text", "declared", "contact", "timed", "terminals", "sheet", "line"],
      records: rows.flatMap(({ device, kind, text, declared, used, spare }) => {
        const own = [device, kind, text, declared ? printedPoles(declared) : ""];
        return [
          ...used.map((contact) => [...own, contact.type, contact.timed ? "timed" : "", contact.terminals, contact.sheet, contact.line]),
          ...spare.map((contact) => [...own, contact.type, contact.timed ? "timed" : "", contact.terminals, "spare", ""]),
        ];
      }),
      shared: 4,
      data: rows,
    };
  },
};

/** `1/101, 3/C5`, and `/1.2, /3.C5` in the international convention. */
function places(drawn: readonly DrawnAt[], { drawing: { convention } }: Machine): string {
  return drawn
    .map(({ sheet, line, zone = "" }) => (line === undefined ? zonePlace({ sheet, zone }, convention) : linePlace(sheet, line, convention)))
    .join(", ");
}
