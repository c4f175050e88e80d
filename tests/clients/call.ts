// Calls a running service through the generated client. The expected numbers are those of the example files.
import { readFileSync } from "node:fs";
import createClient from "openapi-fetch";
import type { components, paths } from "./schema";

type Schemas = components["schemas"];
const [base = "", examples = ""] = process.argv.slice(2);
// Some calls answer with a chart, too, if asked to: the media types say which answers are meant.
const client = createClient<paths, "application/json" | "application/problem+json">({ baseUrl: base });

function example(name: string) {
  return JSON.parse(readFileSync(`${examples}/${name}.json`, "utf8"));
}

function same(what: string, actual: unknown, expected: unknown) {
  if (actual !== expected) throw new Error(`${what}: ${actual} is not ${expected}`);
}

async function padCapacity() {
  const expected = example("pad-capacity/hoist_caliper_at_its_limit").response.results;
  const body: Schemas["PadCapacityRequest"] = {
    pad: {
      shape: "annular_sector",
      inner_radius: { value: 150, unit: "mm" },
      outer_radius: { value: 210, unit: "mm" },
      angle: { value: 40, unit: "deg" },
    },
    lining: { friction: { low: 0.33, nominal: 0.38, high: 0.44 }, max_pressure: { value: 2.4, unit: "MPa" } },
  };
  const { data, error } = await client.POST("/v1/pad-capacity", { body });
  if (!data) throw new Error(error?.detail);
  same("torque", data.results.friction_cases[0]?.torque.value, expected.friction_cases[0].torque.value);
}

async function outline() {
  const { request, response } = example("pad-capacity/rotor_pad_outline");
  const points: Schemas["OutlinePad"]["points"] = request.pad.points;
  const pad: Schemas["Pad"] = { shape: "outline", unit: "mm", points };
  const body: Schemas["PadCapacityRequest"] = { ...request, pad };
  const { data } = await client.POST("/v1/pad-capacity", { body });
  same("area", data?.results.pad_area.value, response.results.pad_area.value);
}

async function stopping() {
  const { request, response } = example("stopping/tractor_on_a_ramp");
  const body: Schemas["StoppingRequest"] = request;
  const { data } = await client.POST("/v1/stopping", { body });
  const distance: Schemas["Length"] | undefined = data?.results.friction_cases[0]?.total_distance;
  same("distance", distance?.value, response.results.friction_cases[0].total_distance.value);
}

async function refused() {
  const { request, response } = example("pad-capacity/several_faults");
  const { error, response: answer } = await client.POST("/v1/pad-capacity", { body: request });
  same("status", answer.status, 422);
  const problem: Schemas["Problem"] | undefined = error;
  same("pointer", problem?.errors?.[0]?.pointer, response.errors[0].pointer);
  same("count", problem?.error_count, response.error_count);
}

async function main() {
  for (const check of [padCapacity, outline, stopping, refused]) await check();
  console.log("TypeScript: four calls answered as expected");
}

main().catch((error) => {
  console.error(error);
  process.exit(1);
});
