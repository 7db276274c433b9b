import { listed } from "../machine/report.js";
import { wholeFluidsOf } from "../machine/walk.js";
import { rule } from "./rule.js";

export const portOpen = rule<{ component: string; ports: string[]; all: boolean }>({
  code: "port-open",
  severity: "warning",
  says: ({ component, ports, all }) =>
    all
      ? `${component} is joined to nothing.`
      : `${ports.length === 1 ? "Port" : "Ports"} ${listed(ports, "and")} of ${component} ${ports.length === 1 ? "is" : "are"} joined to nothing.`,
  hint: ({ component, ports, all }) =>
    all ? undefined : `If that is meant, write: plug ${ports.map((port) => `${component}.${port}`).join(", ")}`,
  find: ({ machine }) =>
    wholeFluidsOf(machine).flatMap(({ components }) =>
      components.flatMap(({ name, kind, ports, at }) => {
        const open = ports.filter(({ node, plugged }) => node === undefined && !plugged).map((port) => port.name);
        return open.length === 0 ? [] : [{ component: name ?? kind, ports: open, all: open.length === ports.length, at }];
      }),
    ),
});
