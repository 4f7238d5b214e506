// Prints how well the 180 degree ambiguity of known fields is resolved, and how long it takes:
//   node scripts/validate-disambiguation.mjs [pixels a side, default 512] [transverse noise in G, default 0]
// Scores are the share of right azimuths weighted with the true transverse field; with noise (a
// tenth of it along the line of sight) only pixels of at least 300 G true transverse field count.
import { createServer } from 'vite';

const size = Number(process.argv[2] ?? 512);
const noiseG = Number(process.argv[3] ?? 0);
const server = await createServer({
  server: { middlewareMode: true, ws: false, watch: null },
  logLevel: 'error',
  appType: 'custom',
});
try {
  const { hideAzimuth, KNOWN_FIELDS, scoreFlips, VIEWS } = await server.ssrLoadModule(
    '/test/support/ambiguity.ts',
  );
  const { acuteAngle } = await server.ssrLoadModule('/src/field/disambiguation/acute-angle.ts');
  const { minimumEnergy } = await server.ssrLoadModule(
    '/src/field/disambiguation/minimum-energy.ts',
  );
  console.log(`${size} x ${size} pixels, ${noiseG} G transverse noise`);
  console.log('| field | seen at | acute angle | minimum energy | functional G/Mm | seconds |');
  console.log('|---|---|---|---|---|---|');
  for (const { name, make } of KNOWN_FIELDS) {
    for (const { name: place, view } of VIEWS) {
      const hidden = hideAzimuth(make(size), view, 3, noiseG);
      const least = noiseG > 0 ? 300 : 0;
      const score = (flips) => scoreFlips(hidden, flips, least).toFixed(4);
      const acute = score(acuteAngle(hidden.field).flips);
      const from = performance.now();
      const result = minimumEnergy(hidden.field, { weakG: 2 * noiseG });
      const seconds = ((performance.now() - from) / 1000).toFixed(1);
      const functional = `${result.startFunctional.toFixed(2)} to ${result.functional.toFixed(2)}`;
      const scores = `${acute} | ${score(result.flips)}`;
      console.log(`| ${name} | ${place} | ${scores} | ${functional} | ${seconds} |`);
    }
  }
} finally {
  await server.close();
}
