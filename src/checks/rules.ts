import { coilDrivenTwice } from "./coil-driven-twice.js";
import { coilNeverDriven } from "./coil-never-driven.js";
import { contactOnReturnSide } from "./contact-on-return-side.js";
import { contactWithoutCoil } from "./contact-without-coil.js";
import { cylinderMovesAtStart } from "./cylinder-moves-at-start.js";
import { deviceBridged } from "./device-bridged.js";
import { deviceUnused } from "./device-unused.js";
import { emergencyStopNormallyOpen } from "./emergency-stop-normally-open.js";
import { loadNotFed } from "./load-not-fed.js";
import { pointUsedOnce } from "./point-used-once.js";
import { polesExceeded } from "./poles-exceeded.js";
import { portOpen } from "./port-open.js";
import { pressureNeverReached } from "./pressure-never-reached.js";
import { pumpWithoutRelief } from "./pump-without-relief.js";
import { relayWithoutContacts } from "./relay-without-contacts.js";
import type { RunnableRule } from "./rule.js";
import { sequencesNotRun } from "./sequences-not-run.js";
import { shortAcrossRails } from "./short-across-rails.js";
import { solenoidWithoutValve } from "./solenoid-without-valve.js";
import { supplyUnlikeItsSource } from "./supply-unlike-its-source.js";
import { switchOutsideStroke } from "./switch-outside-stroke.js";
import { terminalOnTwoWires } from "./terminal-on-two-wires.js";
import { twoLoadsInSeries } from "./two-loads-in-series.js";
import { valveCoilNeverDriven } from "./valve-coil-never-driven.js";
import { valveEndBare } from "./valve-end-bare.js";

/** Every design rule. */
export const rules: readonly RunnableRule[] = [
  // electrical
  coilDrivenTwice,
  contactWithoutCoil,
  coilNeverDriven,
  relayWithoutContacts,
  deviceUnused,
  polesExceeded,
  terminalOnTwoWires,
  supplyUnlikeItsSource,
  shortAcrossRails,
  deviceBridged,
  twoLoadsInSeries,
  loadNotFed,
  contactOnReturnSide,
  emergencyStopNormallyOpen,
  pointUsedOnce,
  // across
  solenoidWithoutValve,
  valveCoilNeverDriven,
  switchOutsideStroke,
  // fluid
  portOpen,
  valveEndBare,
  pumpWithoutRelief,
  pressureNeverReached,
  cylinderMovesAtStart,
  // what is to come
  sequencesNotRun,
];
