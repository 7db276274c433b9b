import { expect, test } from "vitest";
import { readText } from "../support/sources.js";
import { firstFluid, firstLadder, nodesOf, soundMachine, written } from "./machine-of.js";

test("the tray stamper is understood whole", () => {
  const machine = soundMachine(readText("samples/tray-stamper.sprung"));
  expect(firstLadder(machine).rungs[0]?.title).toBe("Cycle running");
  expect(written(machine, firstLadder(machine).rungs[0]?.path as never)).toBe(
    "L+ /PB2 1 (PB1 | CR1 3 (/CR2 | /LS1)) @run 2 (-> CR1 | -> LT1) M",
  );
  expect(machine.devices.get("CR2")?.contacts.map(({ id, form }) => `${id} ${form}`)).toEqual([
    "CR2:11-12 NC",
    "CR2:23-24 NO",
    "CR2:31-32 NC",
    "CR2:41-42 NC",
  ]);
  expect(nodesOf(firstFluid(machine)).slice(0, 7)).toEqual([
    "AIR1.1 FRL1.in",
    "FRL1.out V1.1 V2.1",
    "CLAMP.cap V1.4",
    "CLAMP.rod V1.2",
    "V2.4 FC1.in",
    "STAMP.cap FC1.out",
    "STAMP.rod V2.2",
  ]);
  expect(machine.sequences).toHaveLength(1);
});
