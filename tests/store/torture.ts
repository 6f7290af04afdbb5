// npm run torture [-- KILLS [SEED]]: kills the program at random moments and looks at the store after each.
import { torture } from './torture-rounds.ts';

const [kills = '200', seed = '1'] = process.argv.slice(2);
const start = performance.now();
const counts = await torture(Number(kills), Number(seed), (c) => {
  if (c.kills % 20 === 0)
    console.error(`${c.kills} kills, ${c.acknowledged} acknowledged, ${c.faults.length} faults`);
});
for (const fault of counts.faults) console.log(fault);
for (const [fact, count] of Object.entries(counts.killedAfter).sort(([, a], [, b]) => b - a))
  console.log(`${String(count).padStart(5)} killed after: ${fact}`);
console.log(
  `${counts.kills} kills, ${counts.acknowledged} acknowledged replies, ${counts.faults.length} faults, ${((performance.now() - start) / 1000).toFixed(0)} s`,
);
process.exit(counts.faults.length === 0 ? 0 : 1);
