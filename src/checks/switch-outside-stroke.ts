import { rule } from "./rule.js";

export const switchOutsideStroke = rule<{ device: string; cylinder: string; stroke: string }>({
  code: "switch-outside-stroke",
  severity: "error",
  says: ({ device, cylinder, stroke }) => `${device} is never operated there: ${cylinder} has a stroke of ${stroke}.`,
  find: ({ machine }) =>
    [...machine.devices.values()].flatMap(({ name, place, at }) => {
      const stroke = place && machine.components.get(place.cylinder)?.cylinder?.stroke;
      if (!place || !stroke) return [];
      // A single place is given with the little travel to either side over which the switch is operated.
      const [from, to] = place.written === "at" ? Array(2).fill((place.from + place.to) / 2) : [place.from, place.to];
      return from < 0 || to > stroke.value ? [{ device: name, cylinder: place.cylinder, stroke: stroke.text, at: place.at ?? at }] : [];
    }),
});
