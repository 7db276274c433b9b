import { rule } from "./rule.js";
import { hintOnly } from "./safety.js";

/** ISO 13850 and IEC 60947-5-5: an emergency stop acts by opening contacts, so that a broken wire stops the machine too. */
export const emergencyStopNormallyOpen = rule<{ device: string }>({
  code: "emergency-stop-normally-open",
  severity: "warning",
  says: ({ device }) => `${device} is used with normally open contacts only: a broken wire would go unnoticed.`,
  hint: ({ device }) => `Stop with its normally closed contact, /${device}. ${hintOnly}`,
  find: ({ machine }) =>
    [...machine.devices.values()].flatMap(({ name, kind, contacts }) => {
      const [first] = contacts;
      return kind === "emergency-stop" && first && contacts.every(({ form }) => form === "NO") ? [{ device: name, at: first.at }] : [];
    }),
});
