/** The lists that can be made from a drawing. */
export const listNames = ["devices", "wires", "terminals", "contacts"] as const;

export type ListName = (typeof listNames)[number];
