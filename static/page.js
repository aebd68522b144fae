"use strict";
// The page asks the service what a curl user could ask: three requests a solve, shown below the results.
(() => {
  const $ = (id) => document.getElementById(id);
  const form = $("supply");
  const title = document.title;
  let last = null;

  // Reading the form

  const plain = /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i;
  const typed = (input) => {
    const text = input.value.trim();
    return input.dataset.unit && plain.test(text) ? `${text} ${input.dataset.unit}` : text;
  };
  const shown = (input) => !input.closest("[hidden]");

  function put(root, pointer, value) {
    const steps = pointer.split("/").slice(1);
    let at = root;
    steps.forEach((step, index) => {
      if (index === steps.length - 1) { at[step] = value; return; }
      if (at[step] === undefined) at[step] = /^\d+$/.test(steps[index + 1]) ? [] : {};
      at = at[step];
    });
  }

  function supply() {
    const out = {};
    for (const input of form.querySelectorAll("[data-pointer]")) {
      if (!shown(input)) continue;
      const text = typed(input);
      if (text === "" && "optional" in input.dataset) continue;
      const number = "number" in input.dataset && /^\d+$/.test(text);
      put(out, input.dataset.pointer, number ? Number(text) : text);
    }
    return out;
  }

  function arrange() {
    const direct = $("has-transformer").value === "no";
    for (const field of form.querySelectorAll(".transformer")) field.hidden = direct;
    const kind = $("load-kind").value;
    for (const field of form.querySelectorAll(".load")) field.hidden = !field.classList.contains(kind);
  }

  // Errors: a summary with links, and the same words beside each field

  function clear() {
    document.title = title;
    $("summary").hidden = true;
    $("summary").querySelector("ul").replaceChildren();
    for (const old of form.querySelectorAll("p.error")) old.remove();
    for (const input of form.querySelectorAll("[aria-invalid]")) {
      input.removeAttribute("aria-invalid");
      const hint = input.dataset.hint;
      if (hint) input.setAttribute("aria-describedby", hint); else input.removeAttribute("aria-describedby");
    }
  }

  function fieldOf(pointer) {
    const inputs = [...form.querySelectorAll("[data-pointer]")].filter(shown);
    return inputs.find((i) => i.dataset.pointer === pointer)
      || inputs.find((i) => i.dataset.pointer.startsWith(pointer + "/"))
      || inputs.find((i) => pointer.startsWith(i.dataset.pointer));
  }

  function labelOf(input) {
    return form.querySelector(`label[for="${input.id}"]`).textContent;
  }

  function beside(input, text) {
    let place = $(`${input.id}-error`);
    if (!place) {
      place = document.createElement("p");
      place.className = "error";
      place.id = `${input.id}-error`;
      input.dataset.hint = input.getAttribute("aria-describedby") || "";
      input.closest(".field").append(place);
      input.setAttribute("aria-invalid", "true");
      input.setAttribute("aria-describedby", `${input.dataset.hint} ${place.id}`.trim());
    }
    const hidden = element("span", "Error: ", "hidden");
    place.append(hidden, document.createTextNode(text + " "));
  }

  function complain(list) {
    const items = $("summary").querySelector("ul");
    for (const { input, text } of list) {
      const item = document.createElement("li");
      if (input) {
        const words = `${labelOf(input)}: ${text}`;
        const link = element("a", words);
        link.href = `#${input.id}`;
        link.addEventListener("click", (event) => { event.preventDefault(); input.focus(); });
        item.append(link);
        beside(input, words);
      } else {
        item.textContent = text;
      }
      items.append(item);
    }
    document.title = `Error: ${title}`;
    $("summary").hidden = false;
    $("summary").focus();
    say("Not solved: see the problem above.");
  }

  function faults(problem) {
    const errors = problem.errors || [];
    if (errors.length === 0) return [{ input: null, text: `${problem.title}: ${problem.detail}` }];
    return errors.map(({ pointer, detail }) => {
      const path = decodeURIComponent(pointer.replace(/^#/, ""));
      const input = path.startsWith("/supply") ? fieldOf(path.slice("/supply".length)) : null;
      return { input, text: input ? detail : `${path} ${detail}` };
    });
  }

  // Asking

  class Refused extends Error {
    constructor(problem) { super(problem.title); this.problem = problem; }
  }

  async function ask(path, body, accept) {
    const answer = await fetch(path, {
      method: "POST",
      headers: { "content-type": "application/json", accept },
      body: JSON.stringify(body),
    });
    if (!answer.ok) throw new Refused(await answer.json());
    return accept === "application/json" ? answer.json() : answer.text();
  }

  function needs() {
    const out = [];
    const wrong = [];
    for (const input of form.querySelectorAll("[data-need]")) {
      const text = typed(input);
      if (text === "") continue;
      const parts = /^([\d.]+(?:e[+-]?\d+)?)\s*([munkM]?)V$/i.exec(text.replace(/\u00a0/g, " "));
      const scale = { "": 1, m: 1e-3, u: 1e-6, n: 1e-9, k: 1e3, M: 1e6 };
      if (!parts || !Number.isFinite(Number(parts[1]))) {
        wrong.push({ input, text: "write one voltage with its unit, for example \"16.5 V\"" });
      } else {
        out.push({ kind: input.dataset.need, volts: Number(parts[1]) * scale[parts[2]] });
      }
    }
    return { out, wrong };
  }

  async function solve() {
    clear();
    const { out: wanted, wrong } = needs();
    if (wrong.length > 0) { complain(wrong); return; }
    const body = supply();
    const requests = [
      ["/v1/derating", { supply: body, policy: $("policy").value }],
      ["/v1/worst-case", { supply: body }],
      ["/v1/operating-point", { supply: body, waveforms: { points: 400 } }],
    ];
    say("Solving…");
    form.querySelector("button").disabled = true;
    try {
      // The operating point comes first: it finds faults of the supply before the longer work begins.
      const point = await ask(...requests[2], "application/json");
      const [derating, worst, plot] = await Promise.all([
        ask(...requests[0], "application/json"),
        ask(...requests[1], "application/json"),
        ask(...requests[2], "image/svg+xml"),
      ]);
      last = { wanted, point, derating, worst, plot, requests };
      show();
    } catch (error) {
      if (error instanceof Refused) complain(faults(error.problem));
      else complain([{ input: null, text: `The service cannot be reached: ${error.message}` }]);
    } finally {
      form.querySelector("button").disabled = false;
    }
  }

  // Showing

  function element(name, text, className) {
    const made = document.createElement(name);
    if (text !== undefined) made.textContent = text;
    if (className) made.className = className;
    return made;
  }

  function say(text) { $("status").textContent = text; }

  const prefixes = [[1e-9, "n"], [1e-6, "µ"], [1e-3, "m"], [1, ""], [1e3, "k"], [1e6, "M"]];
  function number(value, unit) {
    if (value === null || value === undefined) return "–";
    if ($("digits").checked) return `${value} ${unit === "1" ? "" : unit}`.trim();
    if (unit === "1") return value.toFixed(4);
    const size = Math.abs(value);
    const plainUnit = unit === "deg" || unit === "degC" || unit === "h";
    const found = size === 0 || plainUnit ? [1, ""] : prefixes.filter(([s]) => size >= s * 0.99995).pop() || prefixes[0];
    const scaled = value / found[0];
    const places = Math.max(0, 3 - Math.floor(Math.log10(Math.abs(scaled) || 1)));
    return `${scaled.toFixed(Math.min(places, 6))} ${found[1]}${unit}`;
  }

  const shapes = {
    pass: "M2 9 L6 13 L14 3", fail: "M3 3 L13 13 M13 3 L3 13", unrated: "M3 8 H13", incomplete: "M3 8 H13",
  };
  function word(verdict) {
    const made = element("span", undefined, `word ${verdict}`);
    const svg = document.createElementNS("http://www.w3.org/2000/svg", "svg");
    svg.setAttribute("viewBox", "0 0 16 16");
    svg.setAttribute("aria-hidden", "true");
    const path = document.createElementNS("http://www.w3.org/2000/svg", "path");
    for (const [name, value] of [["d", shapes[verdict]], ["fill", "none"], ["stroke", "currentColor"], ["stroke-width", "2.5"]]) path.setAttribute(name, value);
    svg.append(path);
    made.append(svg, document.createTextNode(verdict));
    return made;
  }

  function corner(ends) {
    const cell = element("td", undefined, "corner");
    const entries = Object.entries(ends);
    if (entries.length === 0) cell.textContent = "nothing is uncertain";
    for (const [pointer, end] of entries) {
      const input = [...form.querySelectorAll("[data-pointer]")].find((i) => i.dataset.pointer === pointer);
      cell.append(element("span", `${input ? labelOf(input).replace(/, in .*/, "") : pointer}: ${end}`));
    }
    return cell;
  }

  function table(id, caption, heads, rows) {
    const box = element("div", undefined, "scroll");
    const made = element("table");
    const heading = element("caption", caption);
    heading.id = `${id}-caption`;
    box.tabIndex = 0;
    box.setAttribute("role", "region");
    box.setAttribute("aria-labelledby", heading.id);
    const head = element("tr");
    for (const [text, kind] of heads) {
      const cell = element("th", text, kind);
      cell.scope = "col";
      head.append(cell);
    }
    const top = element("thead");
    top.append(head);
    const body = element("tbody");
    for (const row of rows) {
      const line = element("tr");
      row.forEach((cell, index) => {
        if (cell instanceof Node) { line.append(cell); return; }
        const made = element(index === 0 ? "th" : "td", cell, heads[index][1]);
        if (index === 0) made.scope = "row";
        line.append(made);
      });
      body.append(line);
    }
    made.append(heading, top, body);
    box.append(made);
    return box;
  }

  function cell(node) { const made = element("td"); made.append(node); return made; }

  function copier(text, label) {
    const button = element("button", label, "plain");
    button.type = "button";
    button.addEventListener("click", async () => {
      try { await navigator.clipboard.writeText(text()); say("Copied."); }
      catch { say("The browser did not allow copying; select the text instead."); }
    });
    return button;
  }

  const csv = (rows) => rows.map((row) => row.map((v) => (/[",\n]/.test(String(v)) ? `"${String(v).replace(/"/g, '""')}"` : String(v))).join(",")).join("\r\n") + "\r\n";
  const ends = (map) => Object.entries(map).map(([p, e]) => `${p}=${e}`).join(" ");

  function requirement() {
    const { wanted, worst } = last;
    return wanted.map(({ kind, volts }) => {
      const range = worst.figures.find((f) => f.pointer === `/outputs/0/rails/0/voltage/${kind}`);
      const low = kind === "valley";
      const value = low ? range.minimum : range.maximum;
      return { name: low ? "Lowest rail voltage" : "Highest rail voltage", volts, value, pass: low ? value >= volts : value <= volts, at: low ? range.at_minimum : range.at_maximum };
    });
  }

  function show() {
    const { point, derating, worst, plot } = last;
    const required = requirement();
    const missed = required.some((r) => !r.pass);
    const whole = missed || derating.verdict === "fail" ? "fail" : derating.verdict;
    $("verdict").replaceChildren(word(whole));
    const failing = derating.checks.filter((c) => c.verdict === "fail").length;
    const unrated = derating.checks.filter((c) => c.verdict === "unrated").length;
    say(`Solved: ${whole}. ${required.filter((r) => !r.pass).length} of ${required.length} requirements missed; ${failing} of ${derating.checks.length} checks fail, ${unrated} unrated; ${worst.coverage.statement}.`);
    $("answer").hidden = false;
    $("needs").replaceChildren(table("needs", "Requirements at the worst corner", [["Requirement"], ["Allowed", "number"], ["Reached", "number"], ["Verdict"], ["At"]],
      required.map((r) => [r.name, number(r.volts, "V"), number(r.value, "V"), cell(word(r.pass ? "pass" : "fail")), corner(r.at)])));
    showChecks(derating);
    showWorst(worst);
    showPlot(plot, point.waveforms);
    showCurl();
    list("assumptions", point.assumptions);
    list("cautions", [...new Set([...point.cautions, ...derating.cautions])]);
  }

  function list(id, items) {
    $(id).replaceChildren(...items.map((text) => element("li", text)));
  }

  const wordsOf = (text) => text.replaceAll("_", " ");

  function showChecks({ checks, policy }) {
    const rows = checks.map((c) => [
      `${wordsOf(c.component.split("/").pop())}, ${wordsOf(c.quantity)}`, number(c.stress, c.unit), number(c.rating, c.unit), number(c.factor, "1"),
      number(c.allowed, c.unit), number(c.ratio, "1"), cell(word(c.verdict)), corner(c.at), element("td", c.source, "source"),
    ]);
    const text = () => csv([["component", "quantity", "unit", "stress", "rating", "factor", "allowed", "ratio", "verdict", "at", "source"],
      ...checks.map((c) => [c.component, c.quantity, c.unit, c.stress ?? "", c.rating ?? "", c.factor, c.allowed ?? "", c.ratio ?? "", c.verdict, ends(c.at), c.source])]);
    $("checks").replaceChildren(
      table("checks", `Policy ${policy.name}: ${policy.title}. Source: ${policy.source}`,
        [["Component"], ["Stress", "number"], ["Rating", "number"], ["Factor", "number"], ["Allowed", "number"], ["Ratio", "number"], ["Verdict"], ["At"], ["Source"]], rows),
      copier(text, "Copy as CSV"));
  }

  const first = /\/voltage\/|diodes\/0\/(current|reverse|loss)|capacitors\/|chokes\/|winding\/|line\/(current|active|power|thd)|losses\/total|^\/efficiency/;

  function showWorst({ figures, coverage }) {
    const wanted = figures.filter((f) => $("every").checked || first.test(f.pointer));
    const rows = wanted.map((f) => [
      wordsOf(f.pointer.replace(/^\//, "").replaceAll("/", " ")), number(f.minimum, f.unit), number(f.nominal, f.unit), number(f.maximum, f.unit),
      corner(f.at_minimum), corner(f.at_maximum), f.known_by,
    ]);
    const text = () => csv([["pointer", "unit", "minimum", "nominal", "maximum", "at_minimum", "at_maximum", "known_by"],
      ...wanted.map((f) => [f.pointer, f.unit, f.minimum, f.nominal, f.maximum, ends(f.at_minimum), ends(f.at_maximum), f.known_by])]);
    $("worst").replaceChildren(
      table("worst", `Extremes over all ends of all bands; ${coverage.statement}`,
        [["Figure"], ["Lowest", "number"], ["Nominal", "number"], ["Highest", "number"], ["Lowest at"], ["Highest at"], ["Known by"]], rows),
      copier(text, "Copy as CSV"));
  }

  function showPlot(svg, waves) {
    const drawn = new DOMParser().parseFromString(svg, "image/svg+xml").documentElement;
    $("plot").replaceChildren(document.importNode(drawn, true));
    const heads = ["t/s", ...waves.rails.map((_, i) => `rail ${i}, U/V`), ...waves.diodes.map((_, i) => `D${i + 1}, I/A`), "line, I/A"];
    const series = [waves.time, ...waves.rails, ...waves.diodes, waves.line_current];
    const rows = waves.time.map((_, i) => series.map((s) => s[i]));
    const box = $("samples").querySelector("div");
    box.replaceChildren(copier(() => csv([heads, ...rows]), "Copy as CSV"));
    // Four hundred rows are made only for who opens them.
    $("samples").ontoggle = () => {
      if (!$("samples").open || box.querySelector("table")) return;
      box.append(table("samples", "One cycle at nominal values, from zero crossing to zero crossing", heads.map((h) => [h, "number"]),
        rows.map((row) => row.map((v) => ($("digits").checked ? String(v) : v.toPrecision(5))))));
    };
    if ($("samples").open) $("samples").ontoggle();
  }

  function showCurl() {
    const base = location.origin;
    const lines = last.requests.map(([path, body]) => `curl -s ${base}${path} -H 'content-type: application/json' -d '${JSON.stringify(body).replaceAll("'", "'\\''")}'`);
    $("curl").replaceChildren(...lines.flatMap((line) => {
      const box = element("pre", line);
      box.tabIndex = 0;
      return [box, copier(() => line, "Copy as curl")];
    }));
  }

  form.addEventListener("submit", (event) => { event.preventDefault(); solve(); });
  for (const id of ["has-transformer", "load-kind"]) $(id).addEventListener("change", arrange);
  for (const id of ["digits", "every"]) $(id).addEventListener("change", () => { if (last) show(); });
  arrange();
  solve();
})();
