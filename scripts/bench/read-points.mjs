// Reads one track in a process of its own and prints how long it took and how much memory it held at its peak.
import { readFileSync } from 'node:fs';

const library = await import(new URL('../../dist/index.js', import.meta.url).href);
const bytes = readFileSync(process.argv[2]);
const start = process.cpuUsage();
const track = library.readTrack({ name: 'long.gpx', bytes });
const used = process.cpuUsage(start);
console.log(
  JSON.stringify({
    points: track.size,
    seconds: (used.user + used.system) / 1e6,
    peakMb: process.resourceUsage().maxRSS / 1024,
  }),
);
