// The form page as a person uses it.
import assert from "node:assert/strict";
import { after, before, test } from "node:test";
import { accessible, base, launch, open, solved } from "./support.mjs";

let browser;
before(async () => { browser = await launch(); });
after(async () => { await browser.close(); });

const submit = (page) => page.click("button[type=submit]");

test("the worked scenario is solved on arrival", async () => {
  const page = await open(browser);
  await solved(page);
  assert.match(await page.textContent("#verdict"), /pass/);
  assert.ok(await page.locator("#worst tbody tr").count() > 15);
  assert.ok(await page.locator("#checks tbody tr").count() >= 3);
  assert.ok((await page.textContent("#worst tbody")).includes("Line voltage: low"), "the corner behind a row is named");
  const svg = page.locator("#plot svg");
  assert.equal(await svg.getAttribute("role"), "img");
  const text = await svg.textContent();
  for (const part of ["U/V", "I/A", "t/ms", "Rail 0 lies between"]) assert.ok(text.includes(part), part);
  assert.deepEqual(page.trouble, []);
});

test("what is typed is solved, with or without its unit", async () => {
  const page = await open(browser);
  await solved(page);
  await page.fill("#line-voltage", "115");
  await page.fill("#primary-voltage", "115\u00a0V");
  await page.fill("#capacitance", "10 mF");
  await submit(page);
  await page.waitForFunction(() => document.getElementById("curl").textContent.includes("115 V"));
  await solved(page);
  const curl = await page.textContent("#curl pre >> nth=0");
  assert.ok(curl.includes('"voltage":"115 V"'), curl);
  assert.ok(curl.includes('"capacitance":"10 mF"'), curl);
});

test("an error stands in the summary and beside its field, and keeps what was typed", async () => {
  const page = await open(browser);
  await solved(page);
  await page.fill("#line-voltage", "0,23 kV");
  await page.fill("#esr", "42 mH");
  await submit(page);
  await page.waitForSelector("#summary:not([hidden])");
  assert.equal(await page.evaluate(() => document.activeElement.id), "summary");
  assert.match(await page.title(), /^Error: /);
  const items = await page.locator("#summary li").allTextContents();
  assert.equal(items.length, 2);
  assert.equal(await page.inputValue("#line-voltage"), "0,23 kV");
  assert.equal(await page.inputValue("#esr"), "42 mH");
  const beside = await page.textContent("#line-voltage-error");
  assert.ok(beside.includes(items[0]), `the same words: ${beside}`);
  assert.equal(await page.getAttribute("#line-voltage", "aria-invalid"), "true");
  assert.match(await page.getAttribute("#line-voltage", "aria-describedby"), /line-voltage-error/);
  await page.click("#summary li:nth-child(2) a");
  assert.equal(await page.evaluate(() => document.activeElement.id), "esr");
  await accessible(page, "error state");
  await page.fill("#line-voltage", "230 V");
  await page.fill("#esr", "42 mohm");
  await submit(page);
  await solved(page);
  assert.equal(await page.isVisible("#summary"), false);
  assert.equal(await page.locator("[aria-invalid]").count(), 0);
  assert.doesNotMatch(await page.title(), /^Error/);
});

test("a missed requirement is a result, not an error", async () => {
  const page = await open(browser);
  await solved(page);
  await page.fill("#valley-min", "21 V");
  await submit(page);
  await page.waitForFunction(() => document.getElementById("verdict").textContent.includes("fail"));
  assert.equal(await page.isVisible("#summary"), false);
  assert.match(await page.textContent("#needs tbody tr:first-child"), /fail/);
});

test("a check fails, and one without a rating leaves the verdict incomplete", async () => {
  const page = await open(browser);
  await solved(page);
  await page.fill("#rated-capacitor", "35 V");
  await submit(page);
  await page.waitForFunction(() => document.getElementById("verdict").textContent.includes("fail"));
  await page.fill("#rated-capacitor", "");
  await submit(page);
  await page.waitForFunction(() => document.getElementById("verdict").textContent.includes("incomplete"));
  assert.match(await page.textContent("#checks tbody"), /unrated/);
});

test("every circuit and load of the form is solved", async () => {
  const page = await open(browser);
  await solved(page);
  for (const circuit of ["bridge", "centre-tap", "half-wave"]) {
    for (const load of ["regulator", "current", "resistance", "open"]) {
      await page.selectOption("#circuit", circuit);
      await page.selectOption("#load-kind", load);
      await submit(page);
      await page.waitForFunction(([c, l]) => document.getElementById("curl").textContent.includes(`"circuit":"${c}"`)
        && document.getElementById("curl").textContent.includes(`"kind":"${l}"`), [circuit, load]);
      await solved(page);
    }
  }
  await page.selectOption("#has-transformer", "no");
  await page.selectOption("#circuit", "bridge");
  await submit(page);
  await page.waitForFunction(() => !document.getElementById("curl").textContent.includes("transformer"));
  await solved(page);
  assert.deepEqual(page.trouble, []);
});

test("the keyboard alone reaches everything, in order, and sees where it is", async () => {
  const page = await open(browser);
  await solved(page);
  const seen = [];
  for (let presses = 0; presses < 90; presses += 1) {
    await page.keyboard.press("Tab");
    const here = await page.evaluate(() => {
      const at = document.activeElement;
      const style = getComputedStyle(at);
      return { id: at.id || at.textContent.trim().slice(0, 30), ring: style.outlineStyle !== "none", body: at === document.body };
    });
    if (here.body) break;
    assert.ok(here.ring, `${here.id} shows its focus`);
    seen.push(here.id);
  }
  for (const id of ["line-voltage", "circuit", "load-kind", "valley-min", "policy", "digits", "every"]) assert.ok(seen.includes(id), id);
  assert.ok(seen.indexOf("line-voltage") < seen.indexOf("capacitance") && seen.indexOf("capacitance") < seen.indexOf("valley-min"));
  await page.focus("#line-voltage");
  await page.keyboard.press("Control+A");
  await page.keyboard.type("240 V");
  await page.keyboard.press("Enter");
  await page.waitForFunction(() => document.getElementById("curl").textContent.includes("240 V"));
});

test("every label says its unit in words, and no placeholder stands for a label", async () => {
  const page = await open(browser);
  const rows = await page.$$eval("input[data-unit]", (inputs) => inputs.map((i) => [i.dataset.unit, i.labels[0].textContent, i.placeholder]));
  const words = { V: "volts", A: "amperes", ohm: "ohms", H: "henries", F: "farads", Hz: "hertz", W: "watts", VA: "volt-amperes" };
  assert.ok(rows.length > 25);
  for (const [unit, label, placeholder] of rows) {
    assert.ok(label.includes(words[unit]), `${label} names ${words[unit]}`);
    assert.equal(placeholder, "");
  }
});

test("tables have captions and scopes, numbers stand right, the plot's data is there", async () => {
  const page = await open(browser);
  await solved(page);
  for (const id of ["needs", "checks", "worst"]) {
    assert.ok((await page.textContent(`#${id} caption`)).length > 10);
    assert.equal(await page.locator(`#${id} th:not([scope])`).count(), 0);
  }
  assert.equal(await page.$eval("#worst td.number", (cell) => getComputedStyle(cell).textAlign), "right");
  await page.click("#samples summary");
  await page.waitForSelector("#samples table");
  assert.equal(await page.locator("#samples tbody tr").count(), 400);
  await page.check("#digits");
  assert.match(await page.textContent("#worst tbody tr:first-child td.number"), /\d\.\d{8,}/);
  await page.check("#every");
  assert.ok(await page.locator("#worst tbody tr").count() > 60);
});

for (const [name, options] of Object.entries({
  light: { colorScheme: "light" },
  dark: { colorScheme: "dark" },
  narrow: { viewport: { width: 320, height: 800 } },
  "forced colours": { forcedColors: "active" },
})) {
  test(`no violation is found: ${name}`, async () => {
    const page = await open(browser, options);
    await solved(page);
    await accessible(page, name);
    if (name === "narrow") {
      const wide = await page.evaluate(() => document.documentElement.scrollWidth);
      assert.ok(wide <= 320, `no sideways scrolling: ${wide}`);
    }
    assert.deepEqual(page.trouble, []);
  });
}

test("it prints with its results and without its buttons", async () => {
  const page = await open(browser);
  await solved(page);
  await page.emulateMedia({ media: "print" });
  assert.equal(await page.isVisible("button[type=submit]"), false);
  assert.equal(await page.isVisible("#worst table"), true);
  const pdf = await page.pdf({ format: "A4" });
  assert.ok(pdf.length > 20_000);
});

test("a curl line of the page gives what the page shows", async () => {
  const page = await open(browser);
  await solved(page);
  const line = await page.textContent("#curl pre >> nth=1");
  const [, url, body] = /^curl -s (\S+) -H 'content-type: application\/json' -d '(.*)'$/s.exec(line);
  assert.ok(url.startsWith(base));
  const answer = await (await fetch(url, { method: "POST", headers: { "content-type": "application/json" }, body })).json();
  await page.check("#digits");
  const valley = answer.figures.find((f) => f.pointer.endsWith("/voltage/valley"));
  assert.ok((await page.textContent("#worst tbody")).includes(`${valley.minimum} V`));
});
