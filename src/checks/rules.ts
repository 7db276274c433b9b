import { coilDrivenTwice } from "./coil-driven-twice.js";
import { coilDropsItselfOut } from "./coil-drops-itself-out.js";
import { coilNeverDriven } from "./coil-never-driven.js";
import { coilWaitsForItself } from "./coil-waits-for-itself.js";
import { contactLeadsNowhere } from "./contact-leads-nowhere.js";
import { contactNeverConducts } from "./contact-never-conducts.js";
import { contactOnReturnSide } from "./contact-on-return-side.js";
import { contactWithoutCoil } from "./contact-without-coil.js";
import { contactWithoutEffect } from "./contact-without-effect.js";
import { cylinderMovesAtStart } from "./cylinder-moves-at-start.js";
import { deviceBridged } from "./device-bridged.js";
import { deviceUnused } from "./device-unused.js";
import { diodeAcrossAcLoad, diodeTurnedRound } from "./diode-beside-load.js";
import { emergencyStopBypassed } from "./emergency-stop-bypassed.js";
import { emergencyStopNormallyOpen } from "./emergency-stop-normally-open.js";
import { fuseOnReturnSide } from "./fuse-on-return-side.js";
import { holdWithoutStop } from "./hold-without-stop.js";
import { loadNotFed } from "./load-not-fed.js";
import { loadVoltageUnlikeSupply } from "./load-voltage-unlike-supply.js";
import { motorUnguarded } from "./motor-unguarded.js";
import { opposedCoilsNotInterlocked } from "./opposed-coils-not-interlocked.js";
import { overloadNotStopping } from "./overload-not-stopping.js";
import { overloadOpensNothing } from "./overload-opens-nothing.js";
import { pointUsedOnce } from "./point-used-once.js";
import { polesExceeded } from "./poles-exceeded.js";
import { portOpen } from "./port-open.js";
import { pressureNeverReached } from "./pressure-never-reached.js";
import { pumpWithoutRelief } from "./pump-without-relief.js";
import { railOfTwoSupplies } from "./rail-of-two-supplies.js";
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
  railOfTwoSupplies,
  shortAcrossRails,
  deviceBridged,
  contactNeverConducts,
  contactWithoutEffect,
  contactLeadsNowhere,
  coilWaitsForItself,
  coilDropsItselfOut,
  twoLoadsInSeries,
  loadNotFed,
  contactOnReturnSide,
  fuseOnReturnSide,
  diodeAcrossAcLoad,
  diodeTurnedRound,
  loadVoltageUnlikeSupply,
  pointUsedOnce,
  // electrical, hints on safety
  emergencyStopNormallyOpen,
  emergencyStopBypassed,
  holdWithoutStop,
  overloadOpensNothing,
  overloadNotStopping,
  motorUnguarded,
  // across
  solenoidWithoutValve,
  valveCoilNeverDriven,
  opposedCoilsNotInterlocked,
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
