import type { SourceRange } from "../language/diagnostic.js";
import { printQuantity } from "../language/print-quantity.js";
import type { ComponentDraft } from "./components.js";
import { bareComponent, draftOf } from "./components.js";
import { strokeOf } from "./cylinder.js";
import type { DeviceDraft } from "./device-words.js";
import { bareDevice } from "./devices.js";
import type { CircuitDraft, LineBuilder } from "./fluid-lines.js";
import { isSensorKind, type SensorKind } from "./kinds.js";
import type { Device, FluidComponent } from "./model.js";
import type { Names } from "./names.js";
import { didYouMean, listed, type Report, withArticle } from "./report.js";
import type { ValveDraft } from "./valve.js";

/** mm of travel over which a switch said to be at one place is operated, to either side of it. */
const switchTravel = 1;

/** Gives a valve the coils it names: the devices that rungs drive. */
export function linkSolenoids(valve: ValveDraft, devices: Map<string, Device>, names: Names, report: Report): void {
  const { component, coils, coil } = valve;
  for (const { name, side } of coils) {
    let solenoid = devices.get(name.text);
    if (solenoid?.kind === "solenoid" && !solenoid.valve) solenoid.valve = { name: component.name as string, side };
    else if (solenoid?.kind === "solenoid") {
      report.error("names-twice", name.at, `${name.text} is already a coil of ${solenoid.valve?.name}.`, {
        seeAlso: [{ message: `${name.text} is first carried here.`, at: solenoid.at }],
        data: { name: name.text },
      });
      continue;
    } else {
      if (!names.claim(name, "solenoid")) continue;
      solenoid = bareDevice(name, "solenoid");
      solenoid.valve = { name: component.name as string, side };
      devices.set(name.text, solenoid);
    }
    if (coil.power && !solenoid.coil?.power) solenoid.values.push(printQuantity(coil.power));
    if (coil.power || coil.inrush) solenoid.coil = { ...coil, ...solenoid.coil };
    if (component.text !== undefined) solenoid.text ??= component.text;
  }
}

/** Places limit and proximity switches along the strokes of their cylinders. */
export function linkSwitches(
  drafts: readonly DeviceDraft[],
  components: ReadonlyMap<string, FluidComponent>,
  names: Names,
  report: Report,
): void {
  for (const draft of drafts) {
    const { device, on, where, declaration } = draft;
    if (device.kind !== "limit-switch" && device.kind !== "proximity-switch") continue;
    if (!on) {
      if (where) report.error("property-missing", where.at, `Which cylinder operates ${device.name}? Write "on" and its name.`);
      continue;
    }
    const cylinder = findCylinder(draft, components, names, report);
    if (!cylinder) continue;
    if (!where) {
      const hint = `Say where: "on ${cylinder.name} at retracted", "at extended", "at 40 mm" or "from 40 mm to 55 mm".`;
      // A place that was written but could not be read has its own message.
      if (!declaration.items.some((item) => item.kind === "word" && (item.text === "at" || item.text === "from"))) {
        report.error("property-missing", on.at, `${device.name} needs its place along the stroke of ${cylinder.name}.`, { hint });
      }
      continue;
    }
    const spec = cylinder.cylinder as NonNullable<FluidComponent["cylinder"]>;
    const stroke = strokeOf(spec);
    const travel = Math.min(switchTravel, stroke / 10);
    const { place } = where;
    const name = cylinder.name as string;
    if (place === "retracted") device.place = { cylinder: name, from: 0, to: travel, written: "retracted" };
    else if (place === "extended") device.place = { cylinder: name, from: stroke - travel, to: stroke, written: "extended" };
    else if ("at" in place) device.place = { cylinder: name, from: place.at - travel, to: place.at + travel, written: "at" };
    else device.place = { cylinder: name, ...place, written: "from-to" };
    device.place.at = where.at;
    spec.switches.push({ device: device.name, from: device.place.from, to: device.place.to });
  }
  for (const { cylinder } of components.values()) {
    cylinder?.switches.sort((a, b) => a.from + a.to - (b.from + b.to));
  }
}

function findCylinder(
  { device, on }: DeviceDraft,
  components: ReadonlyMap<string, FluidComponent>,
  names: Names,
  report: Report,
): FluidComponent | undefined {
  if (on?.kind !== "word" && on?.kind !== "part") {
    report.error("value-missing", on?.at ?? device.at, '"on" is followed by the cylinder that operates the switch.');
    return undefined;
  }
  const name = on.kind === "part" ? on.name : on.text;
  const component = components.get(name);
  if (on.kind === "part") report.error("value-wrong", on.at, `A switch stands on a cylinder, not on a port of it: write "on ${name}".`);
  if (component?.cylinder) return component;
  if (names.isLost(name)) return undefined;
  const kind = names.kindOf(name);
  if (kind !== undefined) report.error("wrong-kind", on.at, `${name} is ${withArticle(kind)}; a switch stands on a cylinder.`);
  else {
    const cylinders = [...components.values()].flatMap(({ name: known, cylinder }) => (cylinder && known ? [known] : []));
    const guess = didYouMean(name, cylinders);
    report.error("unknown-cylinder", on.at, `There is no cylinder ${name} in this drawing.`, {
      ...guess,
      hint: guess.hint ?? (cylinders.length > 0 ? `The cylinders are ${listed(cylinders, "and")}.` : undefined),
    });
  }
  return undefined;
}

/** Puts the switches that sense a fluid into the circuit they sense, under their own designation. */
export function linkSensors(
  drafts: readonly DeviceDraft[],
  circuits: readonly CircuitDraft[],
  byName: Map<string, ComponentDraft>,
  lines: LineBuilder,
  names: Names,
  report: Report,
): void {
  for (const { device, on, rising, falling } of drafts) {
    const { kind: sensorKind } = device;
    if (!isSensorKind(sensorKind)) continue;
    device.senses = { rising, falling };
    const sensor = byName.get(device.name);
    if (!on) continue;
    if (on.kind === "point") {
      const homes = circuits.filter(({ points }) => points.has(on.name));
      const [home] = homes;
      if (!home) {
        report.error(
          "unknown-point",
          on.at,
          `No fluid line names a point @${on.name}.`,
          didYouMean(
            on.name,
            circuits.flatMap(({ points }) => [...points.keys()]),
          ),
        );
        continue;
      }
      if (homes.length > 1) {
        report.error(
          "point-ambiguous",
          on.at,
          `@${on.name} is a point of ${listed(
            homes.map(({ circuit }) => `"${circuit.title}"`),
            "and",
          )}: give it different names.`,
        );
      }
      device.senses.point = on.name;
      lines.tap(home, sensor ?? putSensor(device, sensorKind, home, byName), "P", { kind: "point", point: on.name, at: on.at });
      continue;
    }
    if (on.kind !== "part" && on.kind !== "word") {
      report.error("value-missing", on.at, '"on" is followed by the @point or the port that is sensed.');
      continue;
    }
    const name = on.kind === "part" ? on.name : on.text;
    const target = byName.get(name);
    const home = target && circuits.find(({ drafts: there }) => there.includes(target));
    if (!target || !home) {
      if (names.isLost(name)) continue;
      const kind = names.kindOf(name);
      if (kind === undefined) names.unknown({ text: name, at: on.at });
      else report.error("wrong-kind", on.at, `${name} is ${withArticle(kind)}; ${withArticle(device.kind)} senses a fluid port or @point.`);
      continue;
    }
    if (
      target.component.kind === "tank" &&
      on.kind === "word" &&
      (device.kind === "level-switch" || device.kind === "temperature-switch")
    ) {
      // It stands in the tank and on no line, and is named beside it.
      device.senses.component = name;
      target.component.values.push(device.name);
      continue;
    }
    const ports = target.component.ports.map((port) => port.name);
    const port = on.kind === "part" ? on.part : ports.length === 1 ? (ports[0] as string) : undefined;
    if (port === undefined) {
      report.error("port-missing", on.at, `Which port of ${name}? It has ${listed(ports, "and")}.`, {
        hint: `Write ${name}.${ports[0]}.`,
        data: { ports },
      });
    } else if (!ports.includes(port)) {
      report.error("unknown-port", on.at, `${name} has no port ${port}: it has ${listed(ports, "and")}.`, didYouMean(port, ports));
    } else {
      device.senses.component = name;
      device.senses.port = port;
      lines.tap(home, sensor ?? putSensor(device, sensorKind, home, byName), "P", { kind: "port", draft: target, port, at: on.at });
    }
  }
}

/** The fluid side of a switch that senses a fluid. */
export function putSensor(device: Device, kind: SensorKind, home: CircuitDraft, byName: Map<string, ComponentDraft>): ComponentDraft {
  const component = bareComponent(device.name, kind, home.circuit.medium, device.at);
  component.name = device.name;
  component.text = device.text;
  component.values = [...device.values];
  const draft = draftOf(component);
  home.drafts.push(draft);
  home.circuit.components.push(component);
  byName.set(device.name, draft);
  return draft;
}

/** Finds the motors that pumps are driven by; one declared as a device is put into the circuit beside its pump. */
export function linkDrives(
  circuits: readonly CircuitDraft[],
  devices: ReadonlyMap<string, Device>,
  byName: Map<string, ComponentDraft>,
  names: Names,
  report: Report,
): void {
  for (const home of circuits) {
    for (const { component, drive } of [...home.drafts]) {
      if (!drive) continue;
      const device = devices.get(drive.text);
      const known = byName.get(drive.text);
      if (known?.component.kind === "electric-motor") component.drivenBy = drive.text;
      else if (device?.kind === "motor") {
        component.drivenBy = drive.text;
        const motor = bareComponent(device.name, "electric-motor", home.circuit.medium, device.at);
        motor.name = device.name;
        motor.text = device.text;
        motor.values = [...device.values];
        const draft = draftOf(motor);
        home.drafts.push(draft);
        const at = home.circuit.components.indexOf(component) + 1;
        home.circuit.components.splice(at, 0, motor);
        for (const sheet of home.circuit.sheetBreaks) if (sheet.before >= at) sheet.before++;
        byName.set(device.name, draft);
      } else if (!names.isLost(drive.text)) {
        const kind = names.kindOf(drive.text);
        if (kind === undefined)
          names.unknown(
            drive,
            (other) => other === "motor" || other === "electric-motor",
            `Declare it, as in "motor ${drive.text} 5.5 kW 400 V 3 phase".`,
          );
        else report.error("wrong-kind", drive.at, `${drive.text} is ${withArticle(kind)}; a pump is driven by a motor.`);
      }
    }
  }
}

/** Looks up the motors guarded by overloads and the lamps in push-buttons. */
export function linkDevices(
  drafts: readonly DeviceDraft[],
  devices: ReadonlyMap<string, Device>,
  byName: ReadonlyMap<string, ComponentDraft>,
  names: Names,
  report: Report,
): void {
  const expect = (name: string, at: SourceRange, wanted: string, found: boolean): boolean => {
    if (found) return true;
    if (names.isLost(name)) return false;
    const kind = names.kindOf(name);
    if (kind === undefined) names.unknown({ text: name, at });
    else report.error("wrong-kind", at, `${name} is ${withArticle(kind)}, not ${withArticle(wanted)}.`);
    return false;
  };
  for (const { device, on, lamp } of drafts) {
    if (device.kind === "overload" && on) {
      if (on.kind !== "word") {
        report.error("value-missing", on.at, '"on" is followed by the motor that the overload guards.');
        continue;
      }
      const isMotor = devices.get(on.text)?.kind === "motor" || byName.get(on.text)?.component.kind === "electric-motor";
      if (expect(on.text, on.at, "motor", isMotor)) device.guards = on.text;
    }
    if (lamp && device.button && expect(lamp.text, lamp.at, "pilot-light", devices.get(lamp.text)?.kind === "pilot-light")) {
      device.button.lamp = lamp.text;
    }
  }
}
