// What a TypeScript caller does: a design, a batch and a refused question, with answers read through the types alone.
import { strict as assert } from "node:assert";
import { readFileSync } from "node:fs";
import createClient from "openapi-fetch";
import type { components, paths } from "./loopslack.js";

type Schemas = components["schemas"];
const [, , where = "", examples = ""] = process.argv;
const client = createClient<paths>({ baseUrl: where });
const read = <Question>(place: string): Question => JSON.parse(readFileSync(`${examples}/${place}.question.json`, "utf8"));

// A design. Optional members are sent as null, as clients do that do not tell unset from null.
const asked = read<Schemas["LoopDesignQuestion"]>("designLoop/wash-house");
const { data: design, response } = await client.POST("/v1/loop-design", {
  body: { ...asked, vesselsInParallel: null, acceptWithoutBoiling: null },
  params: { header: { "X-Request-Id": "typescript-client" } },
});
assert(design, "the design was refused");
assert.equal(response.headers.get("x-request-id"), "typescript-client");
assert.equal(design.result.verdict, "holds");
assert(design.result.chosenVessel, "a design that holds names its vessel");
assert.equal(typeof design.result.chosenVessel.nominalVolume.value, "number");

// Units and words are closed unions, kinds narrow: what does not fit is an error of the compiler, not of the service.
const unit: Schemas["VolumeUnit"] = design.result.chosenVessel.nominalVolume.unit;
const named = (fluid: Schemas["Fluid"]): string => {
  switch (fluid.kind) {
    case "water":
      return "water";
    case "propylene-glycol":
    case "ethylene-glycol":
      return fluid.concentration.kind;
    case "own":
      return fluid.name;
  }
};
assert.equal(named(asked.fluid), "by-volume");
// @ts-expect-error a length has no such unit
const wrong: Schemas["Length"] = { value: 1, unit: "barg" };
assert.equal(wrong.unit, "barg");

// A batch: every design has its own outcome, in the order asked.
const { data: batch } = await client.POST("/v1/loop-design/batch", {
  body: read<Schemas["LoopDesignBatchQuestion"]>("designLoops/three-roofs"),
});
assert(batch, "the batch was refused");
assert.deepEqual(
  batch.designs.map((outcome) => [outcome.id, outcome.verdict ?? outcome.problem?.status]),
  [["quote-1", "holds"], ["quote-2", "holds"], ["quote-3", 422]],
);
assert.equal(batch.designs[2]?.problem?.errors?.[0]?.pointer, "/staticHeight");
assert.equal(batch.summary.designs, 3);

// A refused question: all faults at once, as a problem document with its own type.
const refused = await client.POST("/v1/loop-design", { body: read<Schemas["LoopDesignQuestion"]>("designLoop/misspelt") });
assert.equal(refused.response.status, 422);
assert(refused.error && "errors" in refused.error && refused.error.errors);
const pointers = refused.error.errors.map((fault) => fault.pointer);
for (const pointer of ["/reliefValve/setPresure", "/staticHeight/unit", "/collectors/0/count"])
  assert(pointers.includes(pointer), `${pointer} is not among ${pointers.join(", ")}`);

console.log(`typescript: designed ${design.result.chosenVessel.nominalVolume.value} ${unit}, a batch, refused ${pointers.length} faults`);
