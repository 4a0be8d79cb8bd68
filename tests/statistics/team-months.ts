// Twelve teams by three months; arm 1 is teams 1 to 6. Invented; results with R 4.2.2 stand beside each use.
const exposures =
  "210,240,230|180,200,190|260,250,270|150,160,170|220,210,240|300,280,310|200,230,220|190,210,200|250,240,260|160,170,150|230,220,250|290,300,270";
const injuries = "1,0,1|2,1,1|0,1,0|0,0,1|1,2,1|0,1,1|3,2,4|1,0,1|2,3,2|0,1,0|4,3,5|1,2,1";
const table = (text: string) => text.split("|").map((team) => team.split(",").map(Number));

export const teamMonths = table(exposures).flatMap((team, index) =>
  team.map((exposure, month) => ({
    events: table(injuries)[index]?.[month] ?? -1,
    exposure,
    arm: index < 6 ? 1 : 0,
    cluster: `team ${index + 1}`,
    month: `month ${month + 1}`,
  })),
);
