// A prediction through the generated types, as a planner's own page would ask for it.
// The hours are those of openapi/examples/shortest.json, in an invented room.

import assert from "node:assert/strict";
import createClient from "openapi-fetch";
import type { components, paths } from "./dipcast.js";

type PredictionRequest = components["schemas"]["PredictionRequest"];

const address = process.argv[2];
assert(address !== undefined, "usage: predict ADDRESS");
const client = createClient<paths, "application/json" | "application/problem+json">({ baseUrl: address });

function aMorning(device: string): PredictionRequest {
    return {
        device_example: device,
        weather: {
            kind: "inline",
            start: "2026-06-01T08:00:00Z",
            air_temperature_c: [20.5, 21.0, 21.6, 22.1, 22.4, 22.3],
            relative_humidity_pct: [58, 56, 53, 51, 50, 50],
        },
        options: { bands: false },
    };
}

async function predicts(): Promise<void> {
    const { data, error } = await client.POST("/v1/predictions", { body: aMorning("shelf-180") });
    assert(data !== undefined, JSON.stringify(error));
    const cycles = data.hours?.cycles ?? [];
    const total = cycles.reduce((sum, each) => sum + each, 0);
    assert(data.summary.hours === 6 && data.summary.cycles > 0);
    assert(Math.abs(total - data.summary.cycles) < 1e-3, `${total} against ${data.summary.cycles}`);
    console.log(`${data.summary.cycles.toFixed(0)} cycles in ${data.summary.hours} hours`);
}

async function tellsWhatIsWrong(): Promise<void> {
    const { error } = await client.POST("/v1/predictions", { body: aMorning("shelf-181") });
    const fault = error?.errors?.[0];
    assert(error?.status === 422 && fault?.pointer === "/device_example", JSON.stringify(error));
    console.log(`refused: ${fault.detail}`);
}

await predicts();
await tellsWhatIsWrong();
