// Looks at a page in a browser and tells as JSON what it saw:
//   node look.cjs BROWSER PAGE
// Packages are found by NODE_PATH. The page's own policy lets no script run; what is run here to read and
// judge the page goes past it, after a first look that does not.
const fs = require("fs");
const os = require("os");
const path = require("path");
const { pathToFileURL } = require("url");
const puppeteer = require("puppeteer-core");
const axe = fs.readFileSync(require.resolve("axe-core/axe.min.js"), "utf8");

const FLAGS = [
  "--no-sandbox", "--disable-gpu", "--disable-quic", "--no-first-run",
  "--disable-background-networking", "--disable-component-update", "--disable-sync",
];

// What the pictures say of themselves, and where things really lie in them.
function pictures() {
  const number = (element, name) => Number(element.getAttribute(name));
  const axisOf = (svg, side) => {
    const axis = svg.querySelector(`[data-axis="${side}"]`);
    return axis && Object.assign({}, axis.dataset);
  };
  return [...document.querySelectorAll("svg.picture")].map((svg) => {
    const view = svg.viewBox.baseVal;
    const outside = [...svg.querySelectorAll("text")].filter((text) => {
      const box = text.getBBox();
      return box.width > 0 && (box.x < -0.5 || box.y < -0.5
        || box.x + box.width > view.width + 0.5 || box.y + box.height > view.height + 0.5);
    });
    const spots = [...svg.querySelectorAll(".point")].map((spot) => {
      const box = spot.getBBox();
      return { ...spot.dataset, x: box.x + box.width / 2, y: box.y + box.height / 2 };
    });
    const bars = [...svg.querySelectorAll(".check")].map((check) => {
      const bar = check.querySelector(".bar");
      return { ...check.dataset, x: number(bar, "x"), width: number(bar, "width") };
    });
    const curves = [...svg.querySelectorAll(".curve")].map((curve) => ({ ...curve.dataset }));
    return {
      name: svg.dataset.picture,
      section: svg.closest("section").id,
      title: svg.querySelector("title").textContent,
      told: svg.querySelector("desc").textContent,
      role: svg.getAttribute("role"),
      labelled: svg.getAttribute("aria-labelledby").split(" ")
        .every((id) => document.querySelectorAll(`[id="${id}"]`).length === 1),
      outside: outside.map((text) => text.textContent),
      x: axisOf(svg, "x"),
      y: axisOf(svg, "y"),
      spots, bars, curves,
    };
  });
}

function document_() {
  const ids = [...document.querySelectorAll("[id]")].map((element) => element.id);
  const lost = [...document.querySelectorAll('a[href^="#"]')]
    .filter((link) => !document.getElementById(link.getAttribute("href").slice(1)));
  const outward = [...document.querySelectorAll("[src],[href],[data],[action],[poster],[srcset]")]
    .filter((element) => !(element.getAttribute("href") || "").startsWith("#"));
  return {
    text: document.body.innerText,
    scripts: document.scripts.length,
    repeatedIds: ids.filter((id, at) => ids.indexOf(id) !== at),
    lostLinks: lost.map((link) => link.getAttribute("href")),
    outward: outward.map((element) => element.outerHTML.slice(0, 200)),
    cells: [...document.querySelectorAll("tr[data-check]")].map((row) => ({ ...row.dataset })),
  };
}

async function main() {
  const [browserPath, file] = process.argv.slice(2);
  const profile = fs.mkdtempSync(path.join(os.tmpdir(), "railwright-browser-"));
  const browser = await puppeteer.launch({
    executablePath: browserPath, headless: true, args: FLAGS, userDataDir: profile,
  });
  try {
    const page = await browser.newPage();
    const seen = { requests: [], console: [], views: {}, pdf: {} };
    page.on("request", (request) => seen.requests.push(request.url()));
    page.on("console", (message) => seen.console.push(message.text()));
    page.on("pageerror", (error) => seen.console.push(String(error)));
    page.on("dialog", (dialog) => { seen.console.push(dialog.message()); dialog.dismiss(); });
    const url = pathToFileURL(file).href;
    await page.goto(url, { waitUntil: "networkidle0" });
    seen.first = url;
    seen.document = await page.evaluate(document_);
    seen.pictures = await page.evaluate(pictures);
    for (const format of ["A4", "Letter"]) {
      const pdf = await page.pdf({ format, preferCSSPageSize: false, printBackground: true });
      seen.pdf[format] = (Buffer.from(pdf).toString("latin1").match(/\/Type\s*\/Page\b/g) || []).length;
    }
    // From here on with a script of our own in the page.
    await page.setBypassCSP(true);
    for (const [name, width, scheme] of [
      ["light", 1200, "light"], ["dark", 1200, "dark"], ["phone", 390, "light"],
    ]) {
      await page.setViewport({ width, height: 900 });
      await page.emulateMediaFeatures([{ name: "prefers-color-scheme", value: scheme }]);
      await page.reload({ waitUntil: "networkidle0" });
      await page.evaluate(axe);
      const found = await page.evaluate(() => window.axe.run(document, { resultTypes: ["violations"] }));
      seen.views[name] = {
        violations: found.violations.map((violation) => ({
          id: violation.id, help: violation.help, at: violation.nodes.slice(0, 3).map((n) => n.html.slice(0, 160)),
        })),
        passes: found.passes.length,
        sideways: await page.evaluate(() => document.scrollingElement.scrollWidth - window.innerWidth),
        ground: await page.evaluate(() => getComputedStyle(document.documentElement).backgroundColor),
      };
    }
    process.stdout.write(JSON.stringify(seen));
  } finally {
    await browser.close();
    fs.rmSync(profile, { recursive: true, force: true });
  }
}

main().catch((error) => { console.error(error); process.exit(1); });
