// A headless browser on the service under test; nothing may be asked of any other host.
import assert from "node:assert/strict";
import { createRequire } from "node:module";
import { readFileSync } from "node:fs";
import { chromium } from "playwright-core";

export const base = process.env.BASE_URL;
assert.ok(base, "BASE_URL names the service");

const axe = readFileSync(createRequire(import.meta.url).resolve("axe-core/axe.min.js"), "utf8");

export async function launch() {
  return chromium.launch({
    executablePath: "/usr/bin/chromium",
    args: ["--no-sandbox", "--disable-gpu", "--disable-quic", "--no-first-run", "--disable-background-networking",
      "--disable-component-update", "--disable-sync"],
  });
}

// A page with its results, that collects what must not happen.
export async function open(browser, options = {}, path = "/") {
  const context = await browser.newContext(options);
  const page = await context.newPage();
  page.trouble = [];
  page.on("pageerror", (error) => page.trouble.push(`error: ${error.message}`));
  page.on("console", (message) => { if (message.type() === "error" && !/status of 4\d\d/.test(message.text())) page.trouble.push(message.text()); });
  page.on("request", (request) => { if (!request.url().startsWith(base) && !request.url().startsWith("data:")) page.trouble.push(`asked for ${request.url()}`); });
  await page.goto(base + path);
  return page;
}

export async function solved(page) {
  await page.waitForFunction(() => document.getElementById("status").textContent.startsWith("Solved"));
}

// Machine checks of WCAG 2.2 AA. The page's policy forbids inline script, so axe is evaluated, not inserted.
export async function accessible(page, what) {
  await page.evaluate(axe);
  const result = await page.evaluate(() => window.axe.run(document, {
    runOnly: ["wcag2a", "wcag2aa", "wcag21a", "wcag21aa", "wcag22aa", "best-practice"],
  }));
  const found = result.violations.map((v) => `${v.id}: ${v.help} (${v.nodes.map((n) => n.target.join(" ")).join("; ")})`);
  assert.deepEqual(found, [], what);
}
