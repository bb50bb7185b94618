/** The two jobs that stand in a fresh demo. They go through the queue like anybody's, so what is looked at was really solved. */

export interface DemoJob { owner: string; document: Record<string, unknown> }

/** Owners by e-mail; sets by the names of sallowmere.ts, given here by their ids. */
export function demoJobs(setIds: { becks: string; springs: string }): DemoJob[] {
  return [
    {
      owner: "tom.okoro@sallowmere.example",
      document: {
        spec: 1, title: "Becks: open to the air, with and without calcite",
        waters: { set: setIds.becks },
        cases: [
          { name: "as measured", close: ["pH", "alkalinity"], activity: "davies" },
          { name: "open to air, no solid", close: ["charge", "pCO2"], pCO2: "420 ppm", activity: "davies", organic: { model: "hruska-2003" } },
          { name: "with calcite", like: "open to air, no solid", react: { gas: "open", solids: { calcite: { supply: "excess" } } } },
        ],
        report: ["pH", "ANC", "alkalinity", "pCO2", "balanceError", "conductivity", "SI", "solids", "gas:CO2"],
      },
    },
    {
      owner: "lise.brandt@sallowmere.example",
      document: {
        spec: 1, title: "Springs: from the open air to soil CO2",
        waters: { set: setIds.springs },
        cases: [
          { name: "no solid", close: ["charge", "pCO2"], activity: "davies" },
          { name: "with calcite", like: "no solid", react: { gas: "open", solids: { calcite: { supply: "excess" } } } },
        ],
        vary: [{ field: "pCO2", from: "400 ppm", to: "40000 ppm", points: 41, scale: "log" }],
        report: ["pH", "ANC", "conservedANC", "DIC", "conductivity", "SI:calcite", "solid:calcite"],
      },
    },
  ];
}
