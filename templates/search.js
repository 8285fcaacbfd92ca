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
  var encoder = new TextEncoder();

  function Column(data, count) {
    this.texts = data.texts;
    this.letters = data.letters;
    this.packed = data.codes;
    this.count = count;
    this.unpacked = null;
    this.folded = null;
  }
  /* The code of each row. */
  Column.prototype.codes = function () {
    if (this.unpacked) return this.unpacked;
    var bytes = encoder.encode(this.packed), letters = this.letters, count = this.count, most = this.texts.length;
    var codes = most <= 256 ? new Uint8Array(count) : most <= 65536 ? new Uint16Array(count) : new Uint32Array(count);
    if (letters === 1) {
      for (var row = 0; row < count; row++) codes[row] = digit[bytes[row]];
    } else if (letters) {
      for (var i = 0, at = 0; i < count; i++) {
        var code = 0;
        for (var n = 0; n < letters; n++) code = code * 91 + digit[bytes[at++]];
        codes[i] = code;
      }
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

  var jobCount = archive.partCounts.length;
  var firstPart = new Uint32Array(jobCount + 1);
  for (var j = 0; j < jobCount; j++) firstPart[j + 1] = firstPart[j] + archive.partCounts[j];
  var partCount = firstPart[jobCount], partJob = new Uint32Array(partCount);
  for (j = 0; j < jobCount; j++) partJob.fill(j, firstPart[j], firstPart[j + 1]);
  function columnsOf(group, count) {
    var columns = {};
    for (var key in group) columns[key] = new Column(group[key], count);
    return columns;
  }
  var jobs = columnsOf(archive.jobs, jobCount), parts = columnsOf(archive.parts, partCount);
  /* The columns hold the codes now, and let go of their letters one by one. */
  archive.jobs = archive.parts = null;

  /* ---- sets of rows: a bit a row */

  function noRows(count) { return new Int32Array((count + 31) >>> 5); }
  function has(bits, row) { return bits[row >>> 5] & (1 << (row & 31)); }
  function fromBit(row) { return -1 << (row & 31); }
  function toBit(row) { return -1 >>> (31 - (row & 31)); }
  function fill(bits, from, end) {
    if (from >= end) return;
    var first = from >>> 5, last = (end - 1) >>> 5;
    if (first === last) {
      bits[first] |= fromBit(from) & toBit(end - 1);
      return;
    }
    bits[first] |= fromBit(from);
    bits.fill(-1, first + 1, last);
    bits[last] |= toBit(end - 1);
  }
  function hasAny(bits, from, end) {
    if (from >= end) return false;
    var first = from >>> 5, last = (end - 1) >>> 5;
    if (first === last) return (bits[first] & fromBit(from) & toBit(end - 1)) !== 0;
    if (bits[first] & fromBit(from)) return true;
    for (var word = first + 1; word < last; word++) if (bits[word]) return true;
    return (bits[last] & toBit(end - 1)) !== 0;
  }
  function sizeOf(bits) {
    for (var word = 0, size = 0; word < bits.length; word++) {
      var pairs = bits[word] - ((bits[word] >>> 1) & 0x55555555);
      var fours = (pairs & 0x33333333) + ((pairs >>> 2) & 0x33333333);
      size += Math.imul((fours + (fours >>> 4)) & 0x0f0f0f0f, 0x01010101) >>> 24;
    }
    return size;
  }
  /* Take in the rows whose code is marked; where `within` is known to hold all of them, look only there. */
  function addRows(bits, codes, marked, within) {
    for (var word = 0, count = codes.length; word < bits.length; word++) {
      if (within && !within[word]) continue;
      var row = word << 5, end = Math.min(row + 32, count), found = 0;
      for (var bit = 0; row < end; row++, bit++) found |= marked[codes[row]] << bit;
      bits[word] |= found;
    }
  }

  /* ---- terms */

  function termsOf(query) {
    var terms = [], pattern = /([A-Za-z_]+)=(?:"([^"]*)"?|([^\s"]*))|"([^"]*)"?|([^\s"]+)/g, found;
    while ((found = pattern.exec(query))) {
      var value = found.slice(2).find(function (text) { return text !== undefined; });
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

  /* Which codes of a column meet a test, of those that met a laxer one; null: none. */
  function codesOf(column, test, lax) {
    var folds = column.folds(), marked = new Uint8Array(folds.length), any = false;
    for (var code = 1; code < folds.length; code++)
      if ((!lax || lax[code]) && test(folds[code])) any = marked[code] = 1;
    return any ? marked : null;
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

  /* What a term asks of which columns. known false: there is no such fact. */
  function questionOf(term) {
    var value = term.value, begins = function (text) { return beginsWord(text, value); };
    if (!term.key) return { known: true, test: begins, narrows: true, jobs: archive.jobWords, parts: archive.partWords };
    var key = term.key === "valve" ? "valves" : term.key, exact = archive.exact.indexOf(key) >= 0;
    var named = function (columns) { return columns[key] && key !== "page" ? [key] : []; };
    return {
      known: Boolean(special[term.key] || named(jobs).length || named(parts).length),
      test: !value ? function () { return true; } : exact ? function (text) { return text === value; } : begins,
      narrows: !exact, jobs: named(jobs), parts: named(parts)
    };
  }

  /* The rows of some columns that meet a question; `lax` is the same of a shorter word. */
  function rowsOf(columns, keys, count, question, lax) {
    var found = { bits: noRows(count), codes: {} };
    keys.forEach(function (key) {
      if (lax && !lax.codes[key]) return;
      var marked = codesOf(columns[key], question.test, lax && lax.codes[key]);
      if (!marked) return;
      found.codes[key] = marked;
      addRows(found.bits, columns[key].codes(), marked, lax && lax.bits);
    });
    return found;
  }

  /*
   * What meets a term: jobs by their own facts, parts by theirs, and `met`: those parts and all parts
   * of those jobs. A word is met only where its beginning is: `shorter` is the answer to that.
   */
  function compile(term, shorter) {
    var answer = { known: true, jobs: { bits: noRows(jobCount), codes: {} }, parts: { bits: noRows(partCount), codes: {} } };
    if (special[term.key]) {
      var meets = special[term.key](term.value);
      for (var job = 0; job < jobCount; job++) if (meets(job)) fill(answer.jobs.bits, job, job + 1);
    } else {
      var question = questionOf(term), lax = question.narrows ? shorter : null;
      answer.known = question.known;
      answer.jobs = rowsOf(jobs, question.jobs, jobCount, question, lax && lax.jobs);
      answer.parts = rowsOf(parts, question.parts, partCount, question, lax && lax.parts);
    }
    answer.met = answer.parts.bits.slice();
    for (job = 0; job < jobCount; job++)
      if (has(answer.jobs.bits, job)) fill(answer.met, firstPart[job], firstPart[job + 1]);
    return answer;
  }

  /* While one types, all words but the last stay the same, and that one grows. First letters stay. */
  var KEPT = 32, answers = new Map(), letterAnswers = new Map();
  function kept(name) { return letterAnswers.get(name) || answers.get(name); }
  function answerTo(term) {
    var name = term.key + "=" + term.value, answer = kept(name), shorter = null;
    if (answer) return answer;
    for (var length = term.value.length - 1; length > 0 && !shorter; length--)
      shorter = kept(term.key + "=" + term.value.slice(0, length));
    answer = compile(term, shorter);
    if (answers.size >= KEPT) answers.delete(answers.keys().next().value);
    answers.set(name, answer);
    return answer;
  }

  function counted(bits) { return { bits: bits, count: sizeOf(bits) }; }

  /*
   * Jobs and parts found. A part is found when it, or its job, meets every term, and it one of them
   * by itself; a job when it meets all by itself or has such a part.
   */
  function search(terms) {
    var found = terms.map(answerTo), jobRows = noRows(jobCount), partRows = noRows(partCount);
    var unknown = terms.filter(function (term, i) { return !found[i].known; });
    if (!unknown.length) {
      fill(jobRows, 0, jobCount);
      found.forEach(function (answer) {
        var bits = answer.parts.bits;
        for (var word = 0; word < partRows.length; word++) partRows[word] |= bits[word];
      });
      found.forEach(function (answer) {
        var met = answer.met, bits = answer.jobs.bits;
        for (var word = 0; word < partRows.length; word++) partRows[word] &= met[word];
        for (word = 0; word < jobRows.length; word++) jobRows[word] &= bits[word];
      });
      for (var job = 0; job < jobCount; job++)
        if (hasAny(partRows, firstPart[job], firstPart[job + 1])) fill(jobRows, job, job + 1);
    }
    return { jobs: counted(jobRows), parts: counted(partRows), unknown: unknown };
  }

  /* ---- order */

  var outcomes = ["pass", "conditional pass", "not judged", "conditional fail", "fail"];
  var compareTexts = new Intl.Collator("en", { numeric: true }).compare;
  function alphabetically(texts) {
    var order = texts.map(function (text, code) { return code; });
    order.sort(function (a, b) { return compareTexts(texts[a], texts[b]); });
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
  /* A rank for each of the codes that stand for the rows; Infinity: unknown. */
  function byColumn(column, how) {
    return function () { return { codes: column.codes(), ranks: how(column.texts) }; };
  }
  var everyJob = Uint32Array.from({ length: jobCount }, function (ignored, job) { return job; });
  function bySet() {
    var maker = alphabetically(jobs.maker.texts), model = alphabetically(jobs.model.texts);
    var makers = jobs.maker.codes(), models = jobs.model.codes(), span = jobs.model.texts.length + 1;
    return { codes: everyJob, ranks: Float64Array.from(everyJob, function (job) {
      var second = model[models[job]];
      return maker[makers[job]] * span + (second === Infinity ? span - 1 : second);
    }) };
  }
  function ratio(upper, lower) {
    return function () {
      return { codes: everyJob, ranks: Float64Array.from(everyJob, function (job) {
        var of = +lower.text(job);
        return of ? +upper.text(job) / of : Infinity;
      }) };
    };
  }
  function ofJob(rank) {
    return function () { return { codes: partJob, ranks: rank().ranks }; };
  }
  /* Empty facts stay behind in both directions, but a set in progress counts as the latest. */
  function returned() {
    var ranks = alphabetically(jobs.returned.texts);
    return { codes: jobs.returned.codes(), ranks: ranks.map(function (rank) { return rank === Infinity ? 1e9 : rank; }) };
  }
  var letters = ["A to Z", "Z to A"], sizes = ["least first", "most first"], dates = ["earliest first", "latest first"];
  var severity = function outcomeOrder(texts) {
    return Float64Array.from(texts, function (text) {
      var rank = outcomes.indexOf(text);
      return rank < 0 ? Infinity : rank;
    });
  };
  var orders = {
    sets: {
      job: { rank: null, says: ["lowest first", "highest first"] },
      set: { rank: bySet, says: letters },
      year: { rank: byColumn(jobs.year_first, numerically), says: ["oldest first", "newest first"] },
      supply: { rank: byColumn(jobs.supply, alphabetically), says: letters },
      returned: { rank: returned, says: dates },
      kept: { rank: ratio(jobs.kept, jobs.of), says: sizes },
      failed: { rank: byColumn(jobs.failed, numerically), says: sizes }
    },
    parts: partCount ? {
      job: { rank: null, says: ["lowest first", "highest first"] },
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

  /* All rows in an order, unknown ones behind; equal ones as they come. Worked out when first asked for. */
  function ranked(order) {
    if (order.rows) return order;
    var rank = order.rank(), codes = rank.codes, ranks = rank.ranks, classes = new Uint32Array(ranks.length);
    var byRank = Array.from(ranks, function (ignored, code) { return code; });
    byRank.sort(function (a, b) { return ranks[a] === ranks[b] ? 0 : ranks[a] < ranks[b] ? -1 : 1; });
    byRank.forEach(function (code, i) {
      var before = byRank[i - 1];
      classes[code] = i === 0 ? 0 : classes[before] + (ranks[code] === ranks[before] ? 0 : 1);
    });
    var next = new Uint32Array(ranks.length + 1), known = 0;
    for (var row = 0; row < codes.length; row++) {
      next[classes[codes[row]] + 1]++;
      if (ranks[codes[row]] !== Infinity) known++;
    }
    for (var i = 1; i < next.length; i++) next[i] += next[i - 1];
    order.rows = new Uint32Array(codes.length);
    for (row = 0; row < codes.length; row++) order.rows[next[classes[codes[row]]]++] = row;
    order.known = known;
    return order;
  }

  /* The first of the rows found, in an order. */
  function first(found, all, order, down, most) {
    var rows = order.rank ? ranked(order).rows : null, known = rows ? order.known : all, taken = [];
    most = Math.min(most, found.count);
    function take(from, end) {
      for (var i = from; i < end && taken.length < most; i++) {
        var at = down ? from + end - 1 - i : i, row = rows ? rows[at] : at;
        if (has(found.bits, row)) taken.push(row);
      }
    }
    take(0, known);
    take(known, all);
    return taken;
  }

  /* ---- the page */

  var field = document.getElementById("q"), status = document.getElementById("status");
  var clear = document.getElementById("clear"), partsFound = document.getElementById("parts-found");
  var tables = { sets: tableOfPlain(), parts: document.getElementById("parts") };
  var setsFound = tables.sets.closest("section");
  var sort = { sets: { key: "returned", down: true }, parts: { key: "job", down: true } };

  /* The plain table of all sets gives its head, and goes. */
  function tableOfPlain() {
    var all = document.getElementById("plain");
    all.insertAdjacentHTML("beforebegin", all.textContent.split("<tbody")[0] + "</table>");
    var table = all.previousElementSibling;
    all.remove();
    table.id = "sets";
    return table;
  }

  function element(name, className, text) {
    var made = document.createElement(name);
    if (className) made.className = className;
    if (text) made.textContent = text;
    return made;
  }
  function plain(text) {
    return /[&<>"]/.test(text) ? text.replace(/[&<>"]/g, function (sign) { return "&#" + sign.charCodeAt(0) + ";"; }) : text;
  }
  function cell(className, text, label) {
    return "<td role=cell class=\"" + className + "\"" + (label && text ? " data-l=" + label : "") + ">" + plain(text) + "</td>";
  }
  function link(address, text) { return "<a href=\"" + plain(address) + "\">" + plain(text) + "</a>"; }
  function setName(job) {
    return (jobs.maker.text(job) + " " + jobs.model.text(job)).trim() || "without a name";
  }
  function head(job, text) {
    return "<tr role=row><th role=rowheader scope=row class=\"p1 k-job\">" + link("jobs/" + job + "/shop.html", text) + "</th>";
  }
  function thousands(digits) { return digits.replace(/\B(?=(\d{3})+$)/g, "\u2009"); }
  function number(text) { return text.replace(/^([<>])/, "$1\u2009").replace(/^\D?\u2009?\d{5,}/, thousands); }

  function setRow(job) {
    var name = jobs.job.text(job), progress = jobs.in_progress.text(job) === "true" ? "<em>in progress</em>" : "";
    return head(name, name) +
      "<td role=cell class=\"p1 k-set\">" + link("models/" + jobs.page.text(job) + ".html", setName(job)) + "</td>" +
      cell("p2", jobs.year.text(job)) +
      cell("p2", jobs.supply.text(job)) +
      "<td role=cell class=p2>" + plain(jobs.returned.text(job)) + progress + "</td>" +
      cell("n p2", jobs.kept.text(job) + " of " + jobs.of.text(job), "kept") +
      cell("n p2", jobs.failed.text(job) + " of " + jobs.capacitors.text(job), "failed") + "</tr>";
  }

  function judged(outcome) {
    if (!outcome) return "";
    return "<span class=\"o" + (outcome === "fail" ? " fail" : "") + "\"><svg class=m aria-hidden=true><use href=\"#m-" +
      plain(outcome.replace(/ /g, "-")) + "\"/></svg>" + plain(outcome) + "</span>";
  }
  function partRow(part) {
    var job = partJob[part], name = jobs.job.text(job);
    return head(name, name + " " + parts.ref.text(part)) +
      cell("p2 k-set", setName(job)) +
      cell("p2", parts.type.text(part) || parts.kind.text(part)) +
      /* a number stays with its unit */
      cell("p2", parts.marked.text(part).replace(/u(?=F\b)/g, "\u00b5").replace(/(\d) (?=\S)/g, "$1\u00a0")) +
      cell("p2", parts.place.text(part)) +
      cell("n p1 k-leakage", number(parts.leakage.text(part)), "leakage") +
      cell("n p1 k-limit", number(parts.limit.text(part)), "limit") +
      "<td role=cell class=\"p1 k-outcome\">" + judged(parts.outcome.text(part)) + "</td>" +
      cell("p2 k-done", parts.done.text(part)) + "</tr>";
  }

  /*
   * Rows stand in groups. The one that fills the screen is drawn at once; the others in the frame after
   * it, or when the page is printed before that. What is off the screen is laid out when the typing
   * pauses, a group a frame, so that no letter waits for it. A group that holds what it held is left alone.
   */
  var GROUP = 25, PAUSE_MS = 150, groups = { sets: [], parts: [] }, undrawn = [], turn = 0;
  function fillGroup(body, rows, rowOf) {
    body.drawn = rows.join();
    body.innerHTML = rows.map(rowOf).join("");
    body.style.setProperty("--rows", rows.length);
  }
  function drawOthers() {
    undrawn.splice(0).forEach(function (draw) { draw(); });
  }
  function layOut(shown) {
    var group = shown === turn && document.querySelector("tbody.later");
    if (!group) return;
    group.className = "";
    requestAnimationFrame(function () { layOut(shown); });
  }
  function afterFrame(shown) {
    if (shown !== turn) return;
    drawOthers();
    setTimeout(function () { layOut(shown); }, PAUSE_MS);
  }
  function draw(name, found, all, rowOf, onScreen) {
    var rows = first(found, all, orders[name][sort[name].key], sort[name].down, SHOWN);
    groups[name].forEach(function (body, i) {
      var own = rows.slice(i * GROUP, (i + 1) * GROUP), now = onScreen && i === 0, kept = body.drawn === own.join();
      if (kept && !now && body.className !== "stale") return;
      body.className = now ? "" : kept ? "later" : "stale";
      if (kept) return;
      if (now) fillGroup(body, own, rowOf);
      else undrawn.push(function () {
        fillGroup(body, own, rowOf);
        body.className = "later";
      });
    });
    var note = document.getElementById(name + "-limited");
    note.hidden = found.count <= SHOWN;
    note.textContent = "The first " + SHOWN + " of " + count(found.count) + " are shown; a further word narrows them.";
  }

  function count(n) { return n > 9999 ? thousands(String(n)) : String(n); }
  function several(n, one, many) { return count(n) + " " + (n === 1 ? one : many); }

  function sentence(query, found) {
    if (found.unknown.length)
      return "No fact is named " + found.unknown.map(function (term) { return term.key; }).join(", ") + ".";
    if (!query) return several(jobCount, "set", "sets") + ", " + several(partCount, "part", "parts") + ".";
    var sets = several(found.jobs.count, "set", "sets");
    if (!found.jobs.count) return "Nothing was found among " + several(jobCount, "set", "sets") + ".";
    return (found.parts.count ? several(found.parts.count, "part", "parts") + " in " + sets : sets) +
      ", of " + count(jobCount) + ".";
  }

  function everything() {
    var rows = noRows(jobCount);
    fill(rows, 0, jobCount);
    return { jobs: counted(rows), parts: counted(noRows(partCount)), unknown: [] };
  }
  var last = null;
  function show() {
    var query = field.value.trim(), shown = ++turn;
    if (last === null || last.query !== query) {
      last = query ? search(termsOf(query)) : everything();
      last.query = query;
    }
    undrawn = [];
    partsFound.hidden = !last.parts.count;
    setsFound.hidden = !last.jobs.count;
    draw("parts", last.parts, partCount, partRow, true);
    draw("sets", last.jobs, jobCount, setRow, last.parts.count < GROUP);
    var says = sentence(query, last);
    if (status.textContent !== says) status.textContent = says;
    if (query) status.dataset.q = query; /* what was asked, on paper */
    else delete status.dataset.q;
    clear.hidden = !query;
    showFilters();
    requestAnimationFrame(function () { setTimeout(afterFrame, 0, shown); });
  }

  /* ---- state in the address */

  /* Browsers refuse an address that changes with every letter: while one types, at the next pause. */
  var remembering = 0;
  function rememberSoon() {
    clearTimeout(remembering);
    remembering = setTimeout(remember, PAUSE_MS);
  }
  function remember() {
    var state = [], query = field.value.trim();
    clearTimeout(remembering);
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
        remember();
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
    return texts.sort(compareTexts);
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
      filter.places = new Map();
      optionsOf(filter).forEach(function (text, i) {
        control.append(new Option(text, text));
        if (!filter.places.has(fold(text))) filter.places.set(fold(text), i + 1);
      });
    }
    control.addEventListener("change", function () { put(filter.key, control.value); });
    filter.control = control;
    box.append(label, control);
    document.getElementById(filter.more ? "more-filters" : "filters").append(box);
  }
  function put(key, value) {
    var pattern = new RegExp("(^|\\s)" + key + "=(\"[^\"]*\"?|[^\\s\"]*)", "gi");
    var rest = field.value.replace(pattern, " ").replace(/\s+/g, " ").trim();
    var quoted = /\s/.test(value) ? "\"" + value.replace(/"/g, "") + "\"" : value;
    field.value = (rest + (value ? " " + key + "=" + quoted : "")).trim();
    show();
    remember();
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
      var place = filter.places.get(value) || 0;
      if (filter.control.selectedIndex !== place) filter.control.selectedIndex = place;
    });
  }

  /* Shown in blocks for the sake of speed, tables stay tables to a screen reader. */
  function makeGroups(name) {
    var table = tables[name];
    table.classList.add("drawn");
    table.setAttribute("role", "table");
    table.tHead.setAttribute("role", "rowgroup");
    table.tHead.rows[0].setAttribute("role", "row");
    table.querySelectorAll("thead th").forEach(function (th) { th.setAttribute("role", "columnheader"); });
    for (var body of Array.from(table.tBodies)) body.remove();
    for (var i = 0; i < SHOWN / GROUP; i++) {
      var group = element("tbody");
      group.setAttribute("role", "rowgroup");
      groups[name].push(group);
      table.append(group);
    }
  }

  filters = filters.filter(function (filter) { return filter.date || filter.column; });
  filters.forEach(makeFilter);
  ["sets", "parts"].forEach(function (name) {
    makeGroups(name);
    makeHeads(name);
  });
  /* On a phone the keyboard leaves room for the field and the answer: all filters fold away. */
  var form = document.getElementById("find"), more = document.getElementById("more");
  var narrow = window.matchMedia("(max-width: 42rem)").matches;
  if (narrow) {
    more.firstElementChild.textContent = "Filters";
    more.firstElementChild.after(document.getElementById("filters"));
  }
  form.hidden = false;
  form.addEventListener("submit", function (event) { event.preventDefault(); });
  field.addEventListener("input", function () {
    show();
    rememberSoon();
  });
  field.addEventListener("change", remember);
  clear.addEventListener("click", function () {
    field.value = "";
    show();
    remember();
    field.focus();
  });
  window.addEventListener("hashchange", function () {
    recall();
    show();
    remember();
  });
  window.addEventListener("beforeprint", drawOthers);

  /* What the first letter typed will need is made ready bit by bit, while nothing is asked. */
  function prepare() {
    var steps = [];
    function unpack(column) { steps.push(function () { column.codes(); }); }
    archive.jobWords.forEach(function (key) { unpack(jobs[key]); });
    archive.partWords.forEach(function (key) { unpack(parts[key]); });
    "abcdefghijklmnopqrstuvwxyz0123456789".split("").forEach(function (letter) {
      steps.push(function () { letterAnswers.set("=" + letter, compile({ key: "", value: letter }, null)); });
    });
    for (var key in parts) unpack(parts[key]);
    (function next() {
      if (!steps.length) return;
      steps.shift()();
      setTimeout(next, 0);
    })();
  }
  recall();
  more.open = !narrow && /\b(maker|model|valve|kind|type|batch|from|to|due)=/.test(field.value);
  show();
  drawOthers();
  remember();
  setTimeout(prepare, 0);
  window.gridleakReady = true;
})();
