import { SOLIDS, SPECIES } from "../named-constants";
import { defineCommand } from "../command";
import { joined } from "../words";
import { nearestName } from "@/lib/schemas/nearest-name";

interface Arguments { name: string | null; temperature: number }

const NAMES: readonly string[] = [...SPECIES.map((each) => each.name), ...SOLIDS.map((each) => each.name)];

export const constants = defineCommand<Arguments>({
  name: "constant",
  title: "Look up a constant with its source",
  keywords: ["log k", "equilibrium", "species", "solid", "solubility", "source", "reaction"],
  help: "The reaction of a species or solid, its log K at a temperature (25 °C unless said) and where the figure comes from.",
  signature: "species or solid [temperature °C]",
  example: "constant calcite 10 °C",
  read(call) {
    const words = call.words.filter((word) => !/^(at|of|,|°c)$/i.test(word.text));
    const last = words[words.length - 1];
    const hasTemperature = words.length > 1 && /^\d+(\.\d+)?(°c)?$/i.test(last.text);
    const name = joined(hasTemperature ? words.slice(0, -1) : words);
    const temperature = hasTemperature ? parseFloat(last.text) : 25;
    if (words.length === 0) return { args: null, marks: [], problems: [{ start: call.start, end: call.start, message: "Which species or solid? For example: constant calcite." }] };
    if (temperature > 90) return { args: null, marks: [], problems: [{ start: last.start, end: last.end, message: "Between 0 and 90 °C." }] };
    const found = NAMES.find((each) => each.toLowerCase() === name.text.toLowerCase() || each.replace("^", "").toLowerCase() === name.text.toLowerCase());
    if (found) return { args: { name: found, temperature }, problems: [], marks: [{ start: name.start, end: name.end, kind: "name" }] };
    return { args: null, marks: [], problems: [{ start: name.start, end: name.end, message: `“${name.text}” is not in the constants set.`, suggestion: nearestName(name.text, NAMES) ?? undefined }] };
  },
  complete: (before, partial) => (before.length > 0 ? [] : NAMES.filter((name) => name.toLowerCase().startsWith(partial.toLowerCase()))
    .map((insert) => ({ insert, detail: SOLIDS.some((solid) => solid.name === insert) ? "solid" : "species" }))),
  async perform({ name, temperature }, host) {
    host.answer({ kind: "waiting", what: "Looking up" });
    const table = await host.constants(temperature);
    host.answer({ kind: "constants", temperature, entries: table.entries.filter((entry) => entry.name === name) });
  },
  apiCall: ({ temperature }) => ({ method: "GET", path: `/api/v1/constants?temperature=${temperature}` }),
});
