import { expect, test } from "vitest";
import { machineOf } from "./machine-of.js";

test("two coils missing their designations are two findings, and the valve keeps both ends", () => {
  const { machine, codes } = machineOf('fluid "A" pneumatic {\n valve V1 5/2 left solenoid right solenoid\n}');
  expect(codes).toEqual(["value-missing", "value-missing"]);
  expect(machine.components.get("V1")?.valve).toMatchObject({ left: [{ kind: "solenoid" }], right: [{ kind: "solenoid" }] });
});

test("a coil may still be called left", () => {
  const { machine, codes } = machineOf('fluid "A" pneumatic {\n valve V1 5/2 left solenoid left right spring\n}');
  expect(codes).toEqual([]);
  expect(machine.components.get("V1")?.valve?.left).toMatchObject([{ kind: "solenoid", solenoid: "left" }]);
});
