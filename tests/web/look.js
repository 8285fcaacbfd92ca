// look.js WORK PAGES: pages in a real browser. WORK holds the sample pages and drawings, PAGES names
// one page a line. Each is looked at in every view; what is wrong is said, exit status 1.
'use strict';
const fs = require('fs');
const path = require('path');
const { pathToFileURL } = require('url');
const { chromium } = require('playwright-core');

const [work, list] = process.argv.slice(2);
const pages = fs.readFileSync(list, 'utf8').split('\n').filter(Boolean);
const axe = require.resolve('axe-core/axe.min.js');
const rules = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice'];
const views = [
  { width: 1280, colorScheme: 'light' }, { width: 390, colorScheme: 'dark' },
  { width: 1280, colorScheme: 'dark' }, { width: 390, colorScheme: 'light' },
];
const MANY = 8; // more pages than this take the views in turn
// The width at which WCAG 2.2, 1.4.10 asks for no scrolling in two directions.
const REFLOW = 320;
let wrong = 0;
function say(page, view, text) {
  wrong++;
  console.log(`${page}: ${view ? `${view.width} ${view.colorScheme || ''}: ` : ''}${text}`);
}

// In the page: what sticks out, which labels of a drawing touch or leave it.
function faults() {
  const found = [];
  if (document.documentElement.scrollWidth > innerWidth)
    found.push(`scrolls sideways: ${document.documentElement.scrollWidth} px`);
  for (const svg of document.querySelectorAll('svg')) {
    const frame = svg.getBoundingClientRect();
    if (!frame.width) continue;
    const texts = [...svg.querySelectorAll('text')].map((text) => {
      const box = text.getBoundingClientRect();
      // The em box is taller than the letters.
      return { name: text.textContent, left: box.left, right: box.right,
               top: box.top + box.height * 0.25, bottom: box.bottom - box.height * 0.25 };
    });
    texts.forEach((text, i) => {
      if (text.left < frame.left - 2 || text.right > frame.right + 2)
        found.push(`'${text.name}' leaves its drawing`);
      for (const other of texts.slice(0, i))
        if (text.left < other.right - 1 && other.left < text.right - 1 &&
            text.top < other.bottom && other.top < text.bottom)
          found.push(`'${text.name}' lies on '${other.name}'`);
    });
  }
  return found;
}

// What a screen reader hears of the tables: how many of each part.
async function tableParts(page) {
  const session = await page.context().newCDPSession(page);
  const { nodes } = await session.send('Accessibility.getFullAXTree');
  const parts = {};
  for (const node of nodes)
    if (!node.ignored && ['table', 'row', 'rowheader'].includes(node.role.value))
      parts[node.role.value] = (parts[node.role.value] || 0) + 1;
  await session.detach();
  return parts;
}

async function lookAt(page, file, view) {
  await page.setViewportSize({ width: view.width, height: 900 });
  await page.emulateMedia({ colorScheme: view.colorScheme });
  await page.goto(pathToFileURL(file).href);
  for (const fault of await page.evaluate(faults)) say(file, view, fault);
  await page.addScriptTag({ path: axe });
  const result = await page.evaluate((tags) => axe.run(document, { runOnly: tags }), rules);
  for (const rule of result.violations)
    say(file, view, `${rule.id}: ${rule.help}: ${rule.nodes[0].html.slice(0, 160)}`);
}

async function lookAtPages(browser) {
  const page = await browser.newPage();
  let file;
  page.on('request', (request) => {
    if (!request.url().startsWith('file:') && !request.url().startsWith('data:'))
      say(file, null, `asks for ${request.url()}`);
  });
  page.on('pageerror', (error) => say(file, null, `script: ${error.message}`));
  let turn = 0;
  for (file of pages.filter((name) => path.basename(name) !== 'hostile.html')) {
    const all = file.startsWith(work + path.sep) || pages.length <= MANY;
    for (const view of all ? views : [views[turn++ % views.length]]) await lookAt(page, file, view);
    await page.setViewportSize({ width: REFLOW, height: 900 });
    for (const fault of await page.evaluate(faults)) say(file, { width: REFLOW }, fault);
  }
  await page.close();
}

// The sample: what the general rules above cannot know.
async function lookAtSample(browser) {
  const file = path.join(work, 'sample.html');
  const page = await browser.newPage({ viewport: { width: 1280, height: 900 } });
  await page.goto(pathToFileURL(file).href);
  const wide = await tableParts(page);
  await page.setViewportSize({ width: 390, height: 900 });
  const narrow = await tableParts(page);
  if (wide.rowheader < 40) say(file, views[0], `only ${wide.rowheader} row heads`);
  // Folding hides the head of a table of texts, and nothing else.
  if (wide.table !== narrow.table || wide.rowheader !== narrow.rowheader ||
      wide.row - narrow.row > 1)
    say(file, { width: 390 }, `folded tables lose parts: ${JSON.stringify([wide, narrow])}`);

  await page.setViewportSize({ width: 1280, height: 900 });
  // The decimal points of the leakage column stand in one line.
  const points = await page.$$eval('#leakage tbody tr:not(.place)', (rows) => rows.map((row) => {
    const slot = row.cells[4].querySelector('.f');
    return slot ? slot.getBoundingClientRect().left : null;
  }).filter((left) => left !== null));
  if (points.length < 15 || Math.max(...points) - Math.min(...points) > 0.6)
    say(file, null, `decimal points out of line: ${Math.min(...points)} to ${Math.max(...points)}`);
  // The first stop of the keyboard leads past everything, and can be seen.
  await page.keyboard.press('Tab');
  const skip = await page.evaluate(() => {
    const box = document.activeElement.getBoundingClientRect();
    return { text: document.activeElement.getAttribute('href'), seen: box.left >= 0 && box.top >= 0 };
  });
  if (skip.text !== '#main' || !skip.seen) say(file, null, `skip link: ${JSON.stringify(skip)}`);
  // For run.sh, which reads what stands on page 1.
  await page.pdf({ path: path.join(work, 'sample.pdf'), preferCSSPageSize: true });
  await page.close();
}

async function lookAtDrawings(browser) {
  const page = await browser.newPage({ viewport: { width: 800, height: 900 } });
  for (const name of fs.readdirSync(work).filter((name) => name.endsWith('.svg'))) {
    const file = path.join(work, name);
    await page.goto(pathToFileURL(file).href);
    const root = await page.evaluate(() => document.documentElement.localName +
      (document.querySelector('parsererror') ? ' with an error' : ''));
    if (root !== 'svg') say(file, null, `is ${root}`);
    for (const fault of await page.evaluate(faults)) say(file, null, fault);
  }
  await page.close();
}

(async () => {
  const browser = await chromium.launch({
    executablePath: process.env.CHROMIUM || '/usr/bin/chromium',
    args: ['--no-sandbox', '--disable-gpu', '--disable-quic'],
  });
  await lookAtPages(browser);
  await lookAtSample(browser);
  await lookAtDrawings(browser);
  // No text of a job runs, however it is written.
  const page = await browser.newPage();
  page.on('dialog', (dialog) => { say('hostile.html', null, 'a script ran'); dialog.dismiss(); });
  await page.goto(pathToFileURL(path.join(work, 'hostile.html')).href);
  await browser.close();
  console.log(`${pages.length} pages looked at, ${wrong} faults`);
  process.exit(wrong ? 1 : 0);
})();
