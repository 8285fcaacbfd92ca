// compare.js make DATA FOLDER: write templates, some by hand, the rest drawn from a fixed seed.
// compare.js check DATA FOLDER: render them with mustache and compare with NAME.ours.
"use strict";
const fs = require("fs");
const path = require("path");
const Mustache = require("mustache");
const [, , action, dataFile, folder] = process.argv;

// Escaping is each format's own: here both sides escape the five signs that HTML needs.
const signs = { "&": "&amp;", "<": "&lt;", ">": "&gt;", '"': "&quot;", "'": "&#39;" };
Mustache.escape = (text) => String(text).replace(/[&<>"']/g, (sign) => signs[sign]);

function readData(text) {
  const stack = [{}];
  const put = (key, value) => {
    const into = stack[stack.length - 1];
    if (Array.isArray(into)) into.push(value);
    else into[key] = value;
  };
  for (const line of text.split("\n")) {
    const [kind, key, ...rest] = line.split(" ");
    if (kind === "text") put(key, rest.join(" ").replace(/\\n/g, "\n"));
    else if (kind === "true") put(key, true);
    else if (kind === "false") put(key, false);
    else if (kind === "map" || kind === "list") {
      const value = kind === "map" ? {} : [];
      put(key, value);
      stack.push(value);
    } else if (kind === "end") stack.pop();
  }
  return stack[0];
}

const partials = {
  line: "[{{name}}]",
  block: "first\n\n{{#yes}}\n  second {{name}}\n{{/yes}}\nlast\n",
  part: "{{ref}}: {{#readings}}<{{.}}>{{/readings}}{{^readings}}none{{/readings}}",
  outer: "({{>line}})",
};

const byHand = [
  "Hello, {{name}}!\n", "{{ name }}{{\tname\n}}", "{{missing}}|{{set.missing}}|{{missing.name}}",
  "{{set.supply.kind}} {{#set}}{{name}} {{model}} {{supply.kind}}{{/set}} {{name}}",
  "{{#set.supply}}{{kind}}{{name}}{{/set.supply}}", "{{#parts}}{{ref}}{{^none}},{{/none}}{{/parts}}",
  "{{#parts}}\n- {{ref}}{{#readings}} {{.}}{{/readings}} {{name}}\n{{/parts}}\n",
  "{{^parts}}x{{/parts}}{{^none}}y{{/none}}{{^empty}}z{{/empty}}{{#empty}}w{{/empty}}",
  "{{#hollow}}map{{/hollow}}{{#no}}no{{/no}}{{^no}}not{{/no}}", "{{! c }}a{{!\n many\n}}b",
  "  {{! alone }}\nx", "a\n  {{#yes}}\nb\n  {{/yes}}\nc", "{{#yes}}\n{{/yes}}", "|{{lines}}|",
  "  {{>block}}\n>", "\t{{> block }}\nend", "x {{>line}} y", "{{#parts}}\n  {{>part}}\n{{/parts}}",
  "{{>outer}}", "{{#yes}}{{#set}}{{#parts}}{{ref}}{{model}}{{/parts}}{{/set}}{{/yes}}", "}} { {",
];

// A small linear congruential generator: the same templates on every run.
let state = 20310214;
function draw(count) {
  state = (state * 1103515245 + 12345) % 2147483648;
  return Math.floor((state / 2147483648) * count);
}
const pick = (list) => list[draw(list.length)];
const names = ["name", "set.model", "set.supply.kind", "missing", "empty", "lines", "ref", "."];
const openable = ["yes", "no", "set", "hollow", "none", "parts", "empty", "missing", "set.supply"];

function inline(depth) {
  const kind = draw(6);
  if (kind === 0 && depth < 3) {
    const name = pick(openable);
    return `{{${pick(["#", "^", "# "])}${name}}}${inline(depth + 1)}{{/${name}}}`;
  }
  if (kind === 1) return `{{! ${pick(["a", "b c", "#x"])} }}`;
  if (kind < 4) {
    const name = pick(names.slice(0, -1));
    return `{{${pick(["", " "])}${name}${pick(["", " "])}}}`;
  }
  return pick(["word ", "x", " & ", "4n7, ", "}"]);
}

function lines(depth) {
  let text = "";
  for (let n = 1 + draw(4); n > 0; n--) {
    const indent = pick(["", "", "  ", "\t"]);
    const kind = draw(7);
    if (kind === 0 && depth < 3) {
      const name = pick(openable);
      text += `${indent}{{${pick(["#", "^"])}${name}}}\n${lines(depth + 1)}${indent}{{/${name}}} \n`;
    } else if (kind === 1) text += `${indent}{{>${pick(Object.keys(partials))}}}\n`;
    else if (kind === 2) text += `${indent}{{! note }}\n`;
    else if (kind === 3) text += "\n";
    else text += `${indent}t${inline(0)}${inline(0)}.\n`;
  }
  return text;
}

const DRAWN = 2000;
function make() {
  const templates = byHand.concat(Array.from({ length: DRAWN }, () => lines(0)));
  templates.forEach((text, i) => fs.writeFileSync(path.join(folder, `${i}.mustache`), text));
  for (const name of Object.keys(partials))
    fs.writeFileSync(path.join(folder, `${name}.partial`), partials[name]);
}

function check() {
  const data = readData(fs.readFileSync(dataFile, "utf8"));
  let compared = 0, differ = 0, empty = 0;
  for (const file of fs.readdirSync(folder).filter((name) => name.endsWith(".mustache"))) {
    const template = fs.readFileSync(path.join(folder, file), "utf8");
    const ours = fs.readFileSync(path.join(folder, file.replace(".mustache", ".ours")), "utf8");
    const theirs = Mustache.render(template, data, partials);
    compared++;
    empty += theirs === "";
    if (ours === theirs) continue;
    if (++differ <= 3)
      console.log(JSON.stringify({ template, ours, theirs }, null, 1));
  }
  console.log(`${compared} templates, ${differ} differ`);
  // Templates that all come out empty would prove nothing.
  process.exit(differ === 0 && compared === byHand.length + DRAWN && empty < compared / 4 ? 0 : 1);
}

if (action === "make") make();
else check();
