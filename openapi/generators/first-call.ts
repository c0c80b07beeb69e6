// A first call with the types of openapi-typescript and the client of openapi-fetch.
import createClient from "openapi-fetch";
import type { components, paths } from "./loopslack.js";

const client = createClient<paths>({ baseUrl: process.argv[2] ?? "http://127.0.0.1:8000" });

const pipe: components["schemas"]["PipeSegment"] = {
  length: { value: 14, unit: "m" },
  tube: { kind: "standard", standard: "en-1057", size: "18x1" },
};
const question: components["schemas"]["LoopDesignQuestion"] = {
  site: { coldestOutdoorTemperature: { value: -12, unit: "degC" } },
  collectors: [
    { count: 3, area: { value: 2.1, unit: "m2" }, areaBasis: "aperture", type: "flat-plate", emptyingClass: "good" },
  ],
  pipeRuns: [
    { role: "flow", segments: [pipe], steamAccess: "open" },
    { role: "return", segments: [pipe], steamAccess: "open" },
  ],
  fluid: { kind: "propylene-glycol", concentration: { kind: "protect-to", temperature: { value: -20, unit: "degC" } } },
  staticHeight: { value: 8, unit: "m" },
  reliefValve: { setPressure: { value: 6, unit: "barg" } },
};

const { data, error } = await client.POST("/v1/loop-design", { body: question });
if (error) throw new Error(`${error.title}: ${error.errors?.map((fault) => fault.message).join(" ") ?? error.detail}`);
const vessel = data.result.chosenVessel;
console.log(`${data.result.verdict}: ${vessel ? `${vessel.nominalVolume.value} ${vessel.nominalVolume.unit}` : "no vessel"}`);
