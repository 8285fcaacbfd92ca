// keystroke.js OUTPUT: how long the list of an archive takes from a keystroke to the page laid out anew, in
// Chromium: processor time of the page's thread, script, style and layout, so that what else the machine does
// is left out. Words are typed letter by letter, twice over; the better of the two counts.
'use strict';
const path = require('path');
const { pathToFileURL } = require('url');
const { chromium } = require('playwright-core');
const words = ['lindmere tern', 'waxed paper coupling', 'place=coupling outcome=fail', '6v6', 'c14', 'maker=brackmoor'];
(async () => {
  const browser = await chromium.launch({ executablePath: '/usr/bin/chromium', args: ['--no-sandbox', '--disable-gpu', '--disable-quic'] });
  const page = await browser.newPage({ viewport: { width: 1280, height: 900 } });
  const started = Date.now();
  await page.goto(pathToFileURL(path.join(process.argv[2], 'index.html')).href);
  const loaded = Date.now() - started;
  await page.waitForTimeout(1500);
  const session = await page.context().newCDPSession(page);
  await session.send('Performance.setTimeDomain', { timeDomain: 'threadTicks' });
  await session.send('Performance.enable');
  const used = async () => {
    const { metrics } = await session.send('Performance.getMetrics');
    const of = (name) => 1000 * metrics.find((metric) => metric.name === name).value;
    return { task: of('TaskDuration'), script: of('ScriptDuration'), layout: of('LayoutDuration'), style: of('RecalcStyleDuration') };
  };
  const type = (text) => page.evaluate((text) => {
    const field = document.getElementById('q');
    field.value = text;
    field.dispatchEvent(new Event('input'));
    void document.body.offsetHeight;
  }, text);
  const best = new Map();
  for (let round = 0; round < 2; round++)
    for (const word of words)
      for (let length = 1; length <= word.length; length++) {
        const text = word.slice(0, length);
        await page.waitForTimeout(5);
        const before = await used();
        await type(text);
        const after = await used();
        const taken = after.task - before.task;
        if (!best.has(text) || taken < best.get(text)[0])
          best.set(text, [taken, `${text}: script ${(after.script - before.script).toFixed(0)}, style ${(after.style - before.style).toFixed(0)}, layout ${(after.layout - before.layout).toFixed(0)}`]);
      }
  const times = [...best.values()];
  times.sort((a, b) => a[0] - b[0]);
  const worst = times[times.length - 1];
  console.log(`index loaded in ${loaded} ms; ${times.length} keystrokes: median ${times[times.length >> 1][0].toFixed(0)} ms, worst ${worst[0].toFixed(0)} ms (${worst[1]})`);
  if (process.argv[3]) for (const time of times) console.log(time[0].toFixed(1), time[1]);
  await browser.close();
})();
