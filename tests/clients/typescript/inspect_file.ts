// A file is looked at before it is used: what is found comes back as a layout, and the layout goes with the prediction.
// The file is made up: a logger's in an invented shop, with semicolons and decimal commas.

import assert from "node:assert/strict";
import createClient from "openapi-fetch";
import type { components, paths } from "./dipcast.js";

type CsvLayout = components["schemas"]["CsvLayout"];
type PredictionRequest = components["schemas"]["PredictionRequest"];

const address = process.argv[2];
assert(address !== undefined, "usage: inspect_file ADDRESS");
const client = createClient<paths, "application/json" | "application/problem+json">({ baseUrl: address });

function readings(): string {
    const lines = ["Time (UTC);Air temperature [°C];Relative humidity [%]"];
    for (let hour = 0; hour < 48; hour += 1) {
        const clock = hour % 24;
        const temperature = (20 + clock / 8).toFixed(2).replace(".", ",");
        const time = `${14 + Math.floor(hour / 24)}.06.2026 ${String(clock).padStart(2, "0")}:00`;
        lines.push(`${time};${temperature};${60 - clock}`);
    }
    return lines.join("\n");
}

// The types say what the parts are; how a form is put together is the browser's own.
function asForm(parts: { weather?: string; request?: PredictionRequest }): FormData {
    const form = new FormData();
    if (parts.request !== undefined) {
        form.append("request", new Blob([JSON.stringify(parts.request)], { type: "application/json" }));
    }
    if (parts.weather !== undefined) {
        form.append("weather", new Blob([parts.weather], { type: "text/csv" }), "shop.csv");
    }
    return form;
}

async function inspects(): Promise<CsvLayout> {
    const { data, error } = await client.POST("/v1/weather/inspections", {
        body: { weather: readings() },
        bodySerializer: () => asForm({ weather: readings() }),
    });
    assert(data !== undefined, JSON.stringify(error));
    assert(data.ready && data.questions.length === 0 && data.faults.length === 0, JSON.stringify(data));
    assert(data.form.delimiter === ";" && data.form.decimal === ",");
    assert(data.readings?.count === 48);
    console.log(`${data.readings.count} readings from ${data.readings.from} to ${data.readings.to}`);
    return data.layout;
}

async function predicts(layout: CsvLayout): Promise<void> {
    const request: PredictionRequest = {
        device_example: "shelf-180",
        weather: { kind: "upload", layout },
        options: { bands: false },
    };
    const { data, error } = await client.POST("/v1/predictions", {
        body: { request, weather: readings() } as never,
        bodySerializer: () => asForm({ request, weather: readings() }),
    });
    assert(data !== undefined, JSON.stringify(error));
    assert(data.summary.hours === 48 && data.summary.cycles > 0);
    console.log(`${data.summary.cycles.toFixed(0)} cycles in ${data.summary.hours} hours`);
}

await predicts(await inspects());
