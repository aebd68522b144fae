// The API documentation: whole without any other host, and within its content security policy.
import assert from "node:assert/strict";
import { after, before, test } from "node:test";
import { launch, open } from "./support.mjs";

let browser;
before(async () => { browser = await launch(); });
after(async () => { await browser.close(); });

test("the documentation shows every operation, opens one and tries it", async () => {
  const page = await open(browser, { viewport: { width: 1200, height: 900 } }, "/docs/");
  await page.waitForSelector(".opblock");
  const origin = new URL(page.url()).origin;
  const { paths } = await (await page.request.get(`${origin}/openapi.json`)).json();
  const operations = Object.values(paths).flatMap((item) => Object.keys(item)).length;
  assert.equal(await page.locator(".opblock").count(), operations);

  const block = page.locator(".opblock", { hasText: "/v1/operating-point" });
  await block.locator("button.opblock-summary-control").click();
  await block.locator("button.try-out__btn").click();
  await block.locator("button.execute").click();
  const answer = block.locator(".live-responses-table");
  await answer.waitFor();
  assert.equal((await answer.locator("tbody td.response-col_status").first().innerText()).trim().slice(0, 3), "200");
  assert.match(await answer.innerText(), /ripple_pp/);

  assert.deepEqual(page.trouble, []);
});
