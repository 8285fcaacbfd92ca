/*
 * The list of the archive: words and filters narrow it as one types. Loaded after search-data.js,
 * which sets gridleakArchive: facts by column, each a dictionary and a string of codes. The same
 * rules as `gridleak find`: a word is met where a word begins so; all must be met; a part is found
 * when it meets what its set does not.
 */
(function () {
  "use strict";
  var archive = window.gridleakArchive;
  if (!archive) return;
  var SHOWN = 200;

  /* ---- facts */

  var digit = new Uint8Array(128);
  for (var d = 0; d < 91; d++) digit[d + 35 === 92 ? 33 : d + 35 === 60 ? 126 : d + 35] = d;

  function Column(data) {
    this.texts = data.texts;
    this.letters = data.letters;
    this.packed = data.codes;
    this.count = data.codes.length / data.letters;
    this.unpacked = null;
    this.folded = null;
    this.ranks = {};
  }
  Column.prototype.codes = function () {
    if (this.unpacked) return this.unpacked;
    var packed = this.packed, letters = this.letters, count = this.count;
    /* one kind of array wherever it can be: the loops below run on many columns */
    var codes = this.texts.length <= 65536 ? new Uint16Array(count) : new Uint32Array(count);
    for (var i = 0, at = 0; i < count; i++) {
      var code = 0;
      for (var n = 0; n < letters; n++) code = code * 91 + digit[packed.charCodeAt(at++)];
      codes[i] = code;
    }
    this.packed = null;
    this.unpacked = codes;
    return codes;
  };
  Column.prototype.text = function (row) { return this.texts[this.codes()[row]]; };
  Column.prototype.folds = function () {
    return this.folded || (this.folded = this.texts.map(fold));
  };

  function fold(text) {
    var plain = /^[\x00-\x7f]*$/.test(text) ? text
      : text.normalize("NFKD").replace(/\p{M}/gu, "").replace(/[\u00df\u1e9e]/g, "ss");
    return plain.toLowerCase();
  }

  function columnsOf(group) {
    var columns = {};
    for (var key in group) columns[key] = new Column(group[key]);
    return columns;
  }
  var jobs = columnsOf(archive.jobs), parts = columnsOf(archive.parts);
  var jobCount = jobs.job.count, partCount = parts.ref ? parts.ref.count : 0;
  var firstPart = new Uint32Array(jobCount + 1);
  for (var j = 0; j < jobCount; j++) firstPart[j + 1] = firstPart[j] + archive.partCounts[j];
  var partJob = new Uint32Array(partCount);
  for (j = 0; j < jobCount; j++) partJob.fill(j, firstPart[j], firstPart[j + 1]);

  /* ---- terms */

  function termsOf(query) {
    var terms = [], pattern = /(?:([A-Za-z_]+)=)?(?:"([^"]*)"?|([^\s"]+))/g, found;
    while ((found = pattern.exec(query))) {
      var value = found[2] !== undefined ? found[2] : found[3];
      if (!value.trim() && !found[1]) continue;
      terms.push({ key: found[1] ? fold(found[1]) : "", value: fold(value.trim()), raw: value.trim() });
    }
    return terms;
  }

  function inWord(text, at) {
    var code = text.charCodeAt(at);
    return (code >= 97 && code <= 122) || (code >= 48 && code <= 57) || code >= 128;
  }
  function beginsWord(text, word) {
    var free = !inWord(word, 0);
    for (var at = text.indexOf(word); at >= 0; at = text.indexOf(word, at + 1))
      if (at === 0 || free || !inWord(text, at - 1)) return true;
    return false;
  }

  /* Which codes of a column meet a test; null: none. */
  function maskOf(column, test) {
    var folds = column.folds(), mask = new Uint8Array(folds.length), any = false;
    for (var code = 1; code < folds.length; code++)
      if (test(folds[code])) any = mask[code] = 1;
    return any ? mask : null;
  }
  /* Set the rows whose fact meets a test; whether any code does. */
  function addRows(rows, column, test) {
    var mask = maskOf(column, test);
    if (!mask) return false;
    var codes = column.codes();
    for (var row = 0, count = rows.length; row < count; row++) rows[row] |= mask[codes[row]];
    return true;
  }
  function addJobs(compiled, column, test) { addRows(compiled.jobs, column, test); }
  function addParts(compiled, column, test) {
    var rows = compiled.parts || new Uint8Array(partCount);
    if (addRows(rows, column, test)) compiled.parts = rows;
  }

  var dateOf = function (job) { return jobs.returned.text(job) || jobs.received.text(job); };
  /* Facts that are worked out of columns. */
  var special = {
    year: function (value) {
      var span = value.split(".."), from = +span[0], to = +(span.length > 1 ? span[1] || 9999 : span[0]);
      return function (job) {
        var first = +jobs.year_first.text(job), last = +jobs.year_last.text(job);
        return first > 0 && first <= to && last >= from;
      };
    },
    from: function (value) { return function (job) { var date = dateOf(job); return date !== "" && date >= value; }; },
    to: function (value) {
      return function (job) { var date = dateOf(job); return date !== "" && date.slice(0, value.length) <= value; };
    },
    due: function (value) {
      return function (job) {
        var date = jobs.call_back.text(job);
        return date !== "" && date.slice(0, value.length) <= value;
      };
    }
  };

  /* Which jobs meet a term, and which parts (null: none). known false: there is no such fact. */
  function compile(term) {
    var compiled = { jobs: new Uint8Array(jobCount), parts: null, known: true }, value = term.value;
    if (!term.key) {
      var begins = function (text) { return beginsWord(text, value); };
      archive.jobWords.forEach(function (key) { addJobs(compiled, jobs[key], begins); });
      archive.partWords.forEach(function (key) { addParts(compiled, parts[key], begins); });
      return compiled;
    }
    if (special[term.key]) {
      var meets = special[term.key](value);
      for (var job = 0; job < jobCount; job++) compiled.jobs[job] = meets(job) ? 1 : 0;
      return compiled;
    }
    var key = term.key === "valve" ? "valves" : term.key;
    var test = archive.exact.indexOf(key) >= 0 ? function (text) { return text === value; }
      : function (text) { return beginsWord(text, value); };
    if (!value) test = function () { return true; };
    compiled.known = Boolean(jobs[key] || parts[key]) && key !== "page";
    if (!compiled.known) return compiled;
    if (jobs[key]) addJobs(compiled, jobs[key], test);
    if (parts[key]) addParts(compiled, parts[key], test);
    return compiled;
  }

  /* While one types, all words but the last stay the same. */
  var compiledBefore = [];
  function compileOnce(term) {
    for (var i = 0; i < compiledBefore.length; i++)
      if (compiledBefore[i].key === term.key && compiledBefore[i].value === term.value) return compiledBefore[i].compiled;
    if (compiledBefore.length >= 12) compiledBefore.shift();
    compiledBefore.push({ key: term.key, value: term.value, compiled: compile(term) });
    return compiledBefore[compiledBefore.length - 1].compiled;
  }

  /* The parts of one job that meet all of `needed`, or, when the job needs none, any of `others`. */
  function collect(job, needed, others, found, at) {
    var start = firstPart[job], end = firstPart[job + 1], part, i, good;
    if (needed.length === 1) {
      for (var only = needed[0], part1 = start; part1 < end; part1++) if (only[part1]) found[at++] = part1;
      return at;
    }
    for (part = start; part < end; part++) {
      if (needed.length) {
        for (good = 1, i = 0; good && i < needed.length; i++) good = needed[i][part];
      } else {
        for (good = 0, i = 0; !good && i < others.length; i++) good = others[i][part];
      }
      if (good) found[at++] = part;
    }
    return at;
  }

  /* Parts and jobs found, in order of jobs. */
  var partsBuffer = new Uint32Array(partCount), jobsBuffer = new Uint32Array(jobCount);
  function search(terms) {
    var compiled = terms.map(compileOnce), parts = 0, jobs = 0;
    var unknown = terms.filter(function (term, i) { return !compiled[i].known; });
    var others = compiled.map(function (term) { return term.parts; }).filter(Boolean);
    for (var job = 0; job < jobCount; job++) {
      var needed = [], possible = true;
      for (var i = 0; i < compiled.length && possible; i++)
        if (!compiled[i].jobs[job]) {
          if (compiled[i].parts) needed.push(compiled[i].parts);
          else possible = false;
        }
      if (!possible) continue;
      var before = parts;
      if (others.length) parts = collect(job, needed, others, partsBuffer, parts);
      if (!needed.length || parts > before) jobsBuffer[jobs++] = job;
    }
    if (unknown.length) jobs = parts = 0;
    return { jobs: jobsBuffer.slice(0, jobs), parts: partsBuffer.slice(0, parts), unknown: unknown };
  }

  /* ---- order */

  var outcomes = ["pass", "conditional pass", "not judged", "conditional fail", "fail"];
  function alphabetically(texts) {
    var order = texts.map(function (text, code) { return code; });
    order.sort(function (a, b) { return texts[a].localeCompare(texts[b], "en", { numeric: true }); });
    var ranks = new Float64Array(texts.length);
    order.forEach(function (code, rank) { ranks[code] = texts[code] === "" ? Infinity : rank; });
    return ranks;
  }
  function numerically(texts) {
    return Float64Array.from(texts, function (text) {
      var number = parseFloat(text.replace(/^[<>]/, ""));
      return isNaN(number) ? Infinity : number;
    });
  }
  /* "0.02 uF 400 V", "250 pF", "4k7": by size, whatever the unit. */
  function bySize(texts) {
    var scale = { p: 1e-12, n: 1e-9, u: 1e-6, "\u00b5": 1e-6, "\u03bc": 1e-6, m: 1e-6, k: 1e3, M: 1e6 };
    return Float64Array.from(texts, function (text) {
      var found = /^\s*([\d.]+)\s*(.?)/.exec(text);
      return found ? parseFloat(found[1]) * (/meg/i.test(text) ? 1e6 : scale[found[2]] || 1) : Infinity;
    });
  }
  function ranksOf(column, how) {
    return column.ranks[how.name] || (column.ranks[how.name] = how(column.texts));
  }
  function byColumn(column, how) {
    return function () {
      var codes = column.codes(), ranks = ranksOf(column, how);
      return function (row) { return ranks[codes[row]]; };
    };
  }
  var setRanks = null;
  function bySet() {
    if (!setRanks) {
      var maker = ranksOf(jobs.maker, alphabetically), model = ranksOf(jobs.model, alphabetically);
      var makers = jobs.maker.codes(), models = jobs.model.codes(), span = jobs.model.texts.length + 1;
      setRanks = Float64Array.from({ length: jobCount }, function (ignored, job) {
        var second = model[models[job]];
        return maker[makers[job]] * span + (second === Infinity ? span - 1 : second);
      });
    }
    return function (job) { return setRanks[job]; };
  }
  function ratio(upper, lower) {
    return function () {
      return function (job) {
        var of = +lower.text(job);
        return of ? +upper.text(job) / of : Infinity;
      };
    };
  }
  function ofJob(order) {
    return function () {
      var rank = order();
      return function (part) { return rank(partJob[part]); };
    };
  }
  var self = function () { return function (row) { return row; }; };
  /* Empty facts stay behind in both directions, but a set in progress counts as the latest. */
  var returned = function () {
    var ranks = ranksOf(jobs.returned, alphabetically), codes = jobs.returned.codes();
    return function (job) { return ranks[codes[job]] === Infinity ? 1e9 : ranks[codes[job]]; };
  };
  var letters = ["A to Z", "Z to A"], sizes = ["least first", "most first"], dates = ["earliest first", "latest first"];
  var severity = function outcomeOrder(texts) {
    return Float64Array.from(texts, function (text) {
      var rank = outcomes.indexOf(text);
      return rank < 0 ? Infinity : rank;
    });
  };
  var orders = {
    sets: {
      job: { rank: self, says: ["lowest first", "highest first"] },
      set: { rank: bySet, says: letters },
      year: { rank: byColumn(jobs.year_first, numerically), says: ["oldest first", "newest first"] },
      supply: { rank: byColumn(jobs.supply, alphabetically), says: letters },
      returned: { rank: returned, says: dates },
      kept: { rank: ratio(jobs.kept, jobs.of), says: sizes },
      failed: { rank: byColumn(jobs.failed, numerically), says: sizes }
    },
    parts: partCount ? {
      job: { rank: self, says: ["lowest first", "highest first"] },
      set: { rank: ofJob(bySet), says: letters },
      type: { rank: byColumn(parts.type, alphabetically), says: letters },
      marked: { rank: byColumn(parts.marked, bySize), says: sizes },
      place: { rank: byColumn(parts.place, alphabetically), says: letters },
      leakage: { rank: byColumn(parts.leakage, numerically), says: sizes },
      limit: { rank: byColumn(parts.limit, numerically), says: sizes },
      outcome: { rank: byColumn(parts.outcome, severity), says: ["best first", "worst first"] },
      done: { rank: byColumn(parts.done, alphabetically), says: letters }
    } : {}
  };

  /* The first rows of a list in an order, without sorting all of it. */
  function first(rows, order, down, most) {
    var rank = order.rank(), sign = down ? -1 : 1;
    var key = function (row) {
      var value = rank(row);
      return value === Infinity ? Infinity : sign * value;
    };
    /* Infinity less itself is no number: equal keys first. */
    function compare(a, b) { return a.key === b.key ? sign * (a.row - b.row) : a.key < b.key ? -1 : 1; }
    var best = [], worst = Infinity, full = false;
    /* Rows come in their own order: from the end that is likelier to be wanted. */
    for (var i = 0; i < rows.length; i++) {
      var row = rows[down ? rows.length - 1 - i : i], value = key(row);
      /* Of equal ones those that came first are nearer to the wanted end. */
      if (full && value >= worst) continue;
      best.push({ key: value, row: row });
      if (best.length >= 4 * most) {
        best.sort(compare);
        best.length = most;
        worst = best[most - 1].key;
        full = true;
      }
    }
    best.sort(compare);
    return best.slice(0, most).map(function (item) { return item.row; });
  }

  /* ---- the page */

  var field = document.getElementById("q"), status = document.getElementById("status");
  var clear = document.getElementById("clear"), partsFound = document.getElementById("parts-found");
  var tables = { sets: document.getElementById("sets"), parts: document.getElementById("parts") };
  var sort = { sets: { key: "returned", down: true }, parts: { key: "job", down: true } };

  function element(name, className, text) {
    var made = document.createElement(name);
    if (className) made.className = className;
    if (text) made.textContent = text;
    return made;
  }
  function cell(row, className, text, label) {
    var made = element("td", className, text);
    if (label && text) made.dataset.l = label;
    row.append(made);
    return made;
  }
  function setName(job) {
    return (jobs.maker.text(job) + " " + jobs.model.text(job)).trim() || "without a name";
  }
  function head(row, href, text) {
    var made = element("th", "p1 k-job"), link = element("a", "", text);
    made.scope = "row";
    link.href = href;
    made.append(link);
    row.append(made);
  }
  function number(text) { return text.replace(/^([<>])/, "$1\u2009").replace(/\B(?=(\d{3})+$)/, text.length > 4 ? "\u2009" : ""); }

  function setRow(job) {
    var row = element("tr"), name = jobs.job.text(job);
    head(row, "jobs/" + name + "/shop.html", name);
    var set = cell(row, "p1 k-set"), link = element("a", "", setName(job));
    link.href = "models/" + jobs.page.text(job) + ".html";
    set.append(link);
    cell(row, "p2", jobs.year.text(job));
    cell(row, "p2", jobs.supply.text(job));
    var back = cell(row, "p2", jobs.returned.text(job));
    if (jobs.in_progress.text(job) === "true") back.append(element("em", "", "in progress"));
    cell(row, "n p2", jobs.kept.text(job) + " of " + jobs.of.text(job), "kept");
    cell(row, "n p2", jobs.failed.text(job) + " of " + jobs.capacitors.text(job), "failed");
    return row;
  }

  function mark(outcome) {
    var space = "http://www.w3.org/2000/svg", svg = document.createElementNS(space, "svg");
    var use = document.createElementNS(space, "use");
    svg.setAttribute("class", "m");
    svg.setAttribute("aria-hidden", "true");
    use.setAttribute("href", "#m-" + outcome.replace(/ /g, "-"));
    svg.append(use);
    return svg;
  }

  function partRow(part) {
    var row = element("tr"), job = partJob[part], name = jobs.job.text(job), outcome = parts.outcome.text(part);
    head(row, "jobs/" + name + "/shop.html", name + " " + parts.ref.text(part));
    cell(row, "p2 k-set", setName(job));
    cell(row, "p2", parts.type.text(part) || parts.kind.text(part));
    /* a number stays with its unit */
    cell(row, "p2", parts.marked.text(part).replace(/(\d) (?=\S)/g, "$1\u00a0"));
    cell(row, "p2", parts.place.text(part));
    cell(row, "n p1 k-leakage", number(parts.leakage.text(part)), "leakage");
    cell(row, "n p1 k-limit", number(parts.limit.text(part)), "limit");
    var judged = cell(row, "p1 k-outcome");
    if (outcome) {
      var says = element("span", outcome === "fail" ? "o fail" : "o");
      says.append(mark(outcome), outcome);
      judged.append(says);
    }
    cell(row, "p2 k-done", parts.done.text(part));
    return row;
  }

  /* The rows that fit a screen or two at once; the rest when the typing pauses. */
  var AT_ONCE = 24, PAUSE_MS = 150, rest = { sets: 0, parts: 0 };
  function draw(name, rows, rowOf) {
    var order = orders[name][sort[name].key];
    var shown = order ? first(rows, order, sort[name].down, SHOWN) : [];
    var body = document.createElement("tbody");
    shown.slice(0, AT_ONCE).forEach(function (row) { body.append(rowOf(row)); });
    tables[name].tBodies[0].replaceWith(body);
    clearTimeout(rest[name]);
    if (shown.length > AT_ONCE)
      rest[name] = setTimeout(function () {
        shown.slice(AT_ONCE).forEach(function (row) { body.append(rowOf(row)); });
      }, PAUSE_MS);
    var note = document.getElementById(name + "-limited");
    note.hidden = rows.length <= SHOWN;
    note.textContent = "The first " + SHOWN + " of " + count(rows.length) + " are shown; a further word narrows them.";
  }

  function count(n) { return n > 9999 ? String(n).replace(/\B(?=(\d{3})+$)/g, "\u2009") : String(n); }
  function several(n, one, many) { return count(n) + " " + (n === 1 ? one : many); }

  function sentence(query, found) {
    if (found.unknown.length)
      return "No fact is named " + found.unknown.map(function (term) { return term.key; }).join(", ") + ".";
    if (!query) return several(jobCount, "set", "sets") + ", " + several(partCount, "part", "parts") + ".";
    var sets = several(found.jobs.length, "set", "sets");
    if (!found.jobs.length) return "Nothing is found among " + several(jobCount, "set", "sets") + ".";
    return (found.parts.length ? several(found.parts.length, "part", "parts") + " in " + sets : sets) +
      ", of " + count(jobCount) + ".";
  }

  var last = null, everyJob = Uint32Array.from({ length: jobCount }, function (ignored, job) { return job; });
  function show() {
    var query = field.value.trim();
    if (last === null || last.query !== query) {
      last = query ? search(termsOf(query)) : { jobs: everyJob, parts: [], unknown: [] };
      last.query = query;
    }
    partsFound.hidden = !last.parts.length;
    draw("parts", last.parts, partRow);
    draw("sets", last.jobs, setRow);
    status.textContent = sentence(query, last);
    clear.hidden = !query;
    showFilters();
    remember(query);
  }

  /* ---- state in the address */

  function remember(query) {
    var state = [];
    if (query) state.push("q=" + encodeURIComponent(query));
    ["sets", "parts"].forEach(function (name) {
      var usual = name === "sets" ? "returned.down" : "job.down";
      var now = sort[name].key + (sort[name].down ? ".down" : ".up");
      if (now !== usual) state.push(name + "=" + now);
    });
    var hash = state.length ? "#" + state.join("&") : "";
    if (hash === location.hash) return;
    history.replaceState(null, "", hash || location.href.split("#")[0]);
  }
  function recall() {
    var state = {};
    location.hash.slice(1).split("&").forEach(function (pair) {
      var at = pair.indexOf("=");
      try {
        if (at > 0) state[pair.slice(0, at)] = decodeURIComponent(pair.slice(at + 1));
      } catch (ignored) { /* an address cut short */ }
    });
    field.value = state.q || "";
    ["sets", "parts"].forEach(function (name) {
      var found = /^([a-z]+)\.(up|down)$/.exec(state[name] || (name === "sets" ? "returned.down" : "job.down"));
      if (found && orders[name][found[1]]) sort[name] = { key: found[1], down: found[2] === "down" };
    });
    showHeads();
  }

  /* ---- heads that sort */

  function showHeads() {
    ["sets", "parts"].forEach(function (name) {
      tables[name].querySelectorAll("thead th").forEach(function (th) {
        var key = th.dataset.k, button = th.querySelector("button"), says = th.querySelector(".how");
        var sorted = sort[name].key === key;
        if (sorted) th.setAttribute("aria-sort", sort[name].down ? "descending" : "ascending");
        else th.removeAttribute("aria-sort");
        if (button && orders[name][key])
          says.textContent = sorted ? ", " + orders[name][key].says[sort[name].down ? 1 : 0] : "";
      });
    });
  }
  function makeHeads(name) {
    tables[name].querySelectorAll("thead th").forEach(function (th) {
      var button = element("button"), unit = th.querySelector(".unit");
      if (!orders[name][th.dataset.k]) return;
      button.type = "button";
      if (unit) unit.remove();
      button.textContent = th.textContent;
      th.textContent = "";
      button.append(element("span", "how"));
      th.append(button);
      if (unit) th.append(unit);
      button.addEventListener("click", function () {
        var key = th.dataset.k, same = sort[name].key === key;
        sort[name] = { key: key, down: same ? !sort[name].down : ["returned", "kept", "failed", "leakage", "outcome"].indexOf(key) >= 0 };
        showHeads();
        show();
      });
    });
  }

  /* ---- filters: each writes its pair into the field, and shows the one that stands there */

  var filters = [
    { key: "supply", column: jobs.supply }, { key: "decade", column: jobs.decade },
    { key: "place", column: parts.place }, { key: "outcome", column: parts.outcome },
    { key: "done", column: parts.done },
    { key: "maker", column: jobs.maker, more: true }, { key: "model", column: jobs.model, more: true },
    { key: "valve", column: jobs.valves, list: true, more: true }, { key: "kind", column: parts.kind, more: true },
    { key: "type", column: parts.type, more: true }, { key: "batch", column: parts.batch, more: true },
    { key: "from", date: true, more: true, label: "returned from" }, { key: "to", date: true, more: true, label: "returned to" },
    { key: "due", date: true, more: true, label: "call-back due by" }
  ];
  function optionsOf(filter) {
    var texts = filter.column.texts.slice(1), seen = {};
    if (filter.list) texts = texts.join(", ").split(", ");
    texts = texts.filter(function (text) { return text && !seen["=" + text] && (seen["=" + text] = true); });
    if (filter.key === "outcome") return outcomes.filter(function (text) { return texts.indexOf(text) >= 0; }).reverse();
    return texts.sort(function (a, b) { return a.localeCompare(b, "en", { numeric: true }); });
  }
  function makeFilter(filter) {
    var box = element("div"), label = element("label", "", filter.label || filter.key);
    var control = element(filter.date ? "input" : "select");
    control.id = "filter-" + filter.key;
    label.htmlFor = control.id;
    if (filter.date) {
      control.type = "date";
    } else {
      control.append(new Option("any", ""));
      optionsOf(filter).forEach(function (text) { control.append(new Option(text, text)); });
    }
    control.addEventListener("change", function () { put(filter.key, control.value); });
    filter.control = control;
    box.append(label, control);
    document.getElementById(filter.more ? "more-filters" : "filters").append(box);
  }
  function put(key, value) {
    var pattern = new RegExp("(^|\\s)" + key + "=(\"[^\"]*\"?|[^\\s\"]+)", "gi");
    var rest = field.value.replace(pattern, " ").replace(/\s+/g, " ").trim();
    var quoted = /\s/.test(value) ? "\"" + value.replace(/"/g, "") + "\"" : value;
    field.value = (rest + (value ? " " + key + "=" + quoted : "")).trim();
    show();
  }
  function showFilters() {
    var terms = termsOf(field.value);
    filters.forEach(function (filter) {
      if (!filter.control) return;
      var value = "";
      terms.forEach(function (term) { if (term.key === filter.key) value = term.value; });
      if (filter.date) {
        filter.control.value = /^\d{4}-\d\d-\d\d$/.test(value) ? value : "";
        return;
      }
      var options = filter.control.options, at = 0;
      if (value) for (var i = 1; i < options.length; i++)
        if (fold(options[i].value) === value) { at = i; break; }
      filter.control.selectedIndex = at;
    });
  }

  document.querySelectorAll("tbody.all").forEach(function (body) { body.replaceWith(document.createElement("tbody")); });
  filters = filters.filter(function (filter) { return filter.date || filter.column; });
  filters.forEach(makeFilter);
  makeHeads("sets");
  makeHeads("parts");
  var form = document.getElementById("find");
  form.hidden = false;
  form.addEventListener("submit", function (event) { event.preventDefault(); });
  field.addEventListener("input", show);
  clear.addEventListener("click", function () {
    field.value = "";
    show();
    field.focus();
  });
  window.addEventListener("hashchange", function () {
    recall();
    show();
  });
  /* What the first letter typed will need is made ready column by column, while nothing is asked. */
  function prepare() {
    var waiting = [];
    archive.jobWords.forEach(function (key) { waiting.push(jobs[key]); });
    archive.partWords.forEach(function (key) { waiting.push(parts[key]); });
    (function next() {
      var column = waiting.pop();
      if (!column) return;
      column.codes();
      column.folds();
      setTimeout(next, 0);
    })();
  }
  recall();
  if (/\b(maker|model|valve|kind|type|batch|from|to|due)=/.test(field.value)) document.getElementById("more").open = true;
  show();
  setTimeout(prepare, 0);
  window.gridleakReady = true;
})();
