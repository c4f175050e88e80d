// Must not compile: a pressure where a length belongs.
import type { components } from "./schema";

export const radius: components["schemas"]["AnnularSectorPad"]["outer_radius"] = { value: 210, unit: "psi" };
