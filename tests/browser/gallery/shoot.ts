/**
 * Builds the gallery, serves it on loopback and takes its pictures: `npx tsx tests/browser/gallery/shoot.ts <folder> [page…]`.
 * Each page (or those named) at 1280, 390 and 320 px, light and dark, one in daylight, one without script, and the icons.
 */
import { mkdirSync, readFileSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join, resolve } from "node:path";
import tailwindcss from "@tailwindcss/vite";
import { chromium } from "playwright-core";
import { build, createServer, type InlineConfig, preview } from "vite";

const out = resolve(process.argv[2] ?? join(tmpdir(), "gallery"));
const dist = join(out, "site");
mkdirSync(out, { recursive: true });

const root = resolve(import.meta.dirname, "../../..");
const shared: InlineConfig = {
  root,
  configFile: false,
  logLevel: "warn",
  publicDir: false,
  plugins: [tailwindcss()],
  resolve: { tsconfigPaths: true },
};
const pagePath = "tests/browser/gallery/index.html";

await build({
  ...shared,
  build: { outDir: dist, emptyOutDir: true, rollupOptions: { input: join(root, pagePath) } },
});

const renderer = await createServer({
  ...shared,
  appType: "custom",
  server: { middlewareMode: true, hmr: false, ws: false },
});
const { renderPage } = await renderer.ssrLoadModule("/tests/browser/gallery/render.tsx");
const shell = readFileSync(join(dist, pagePath), "utf8");
for (const [path, file] of [
  ["/", "index.html"],
  ["/charts", "charts.html"],
  ["/words", "words.html"],
  ["/forms", "forms.html"],
] as const) {
  writeFileSync(join(dist, file), shell.replace("<!--gallery-->", renderPage(path)));
}
await renderer.close();

const site = await preview({
  ...shared,
  build: { outDir: dist },
  preview: { host: "127.0.0.1", port: 4871, strictPort: false },
});
const address = site.resolvedUrls?.local[0] ?? "http://127.0.0.1:4871/";
const browser = await chromium.launch({
  executablePath: "/usr/bin/chromium",
  args: ["--no-sandbox", "--disable-gpu", "--disable-quic", "--no-first-run", "--disable-sync"],
});

const problems: string[] = [];
type Shot = {
  path: string;
  width: number;
  scheme: "light" | "dark" | "daylight";
  script?: boolean;
  media?: "print";
};
const shots: Shot[] = ["", "charts", "words", "forms"].flatMap((path) =>
  [1280, 390, 320].flatMap((width): Shot[] => [
    { path, width, scheme: "light" },
    ...(width === 320 ? [] : [{ path, width, scheme: "dark" } as const]),
  ]),
);
shots.push({ path: "", width: 1280, scheme: "light", script: false });
shots.push({ path: "", width: 800, scheme: "light", media: "print" });
shots.push({ path: "charts", width: 800, scheme: "light", media: "print" });
shots.push({ path: "charts", width: 1280, scheme: "light", script: false });
shots.push({ path: "words", width: 390, scheme: "daylight" });
const wanted = process.argv.slice(3);

for (const { path, width, scheme, script = true, media } of shots) {
  if (wanted.length > 0 && !wanted.includes(path || "figures")) continue;
  const page = await browser.newPage({
    viewport: { width, height: width < 500 ? 844 : 900 },
    colorScheme: scheme === "dark" ? "dark" : "light",
    javaScriptEnabled: script,
  });
  const name = [path || "figures", width, scheme, script ? "" : "noscript", media ?? ""]
    .filter(Boolean)
    .join("-");
  page.on("console", (message) => {
    if (message.type() === "error") problems.push(`${name}: ${message.text()}`);
  });
  page.on("pageerror", (error) => problems.push(`${name}: ${error.message}`));
  await page.goto(`${address}${path}`, { waitUntil: "networkidle" });
  if (scheme === "daylight")
    await page.locator("html").evaluate((html) => html.setAttribute("data-scheme", "daylight"));
  if (media) await page.emulateMedia({ media });
  if (script)
    await page.evaluate(() =>
      document.fonts.ready.then(
        () => document.activeElement instanceof HTMLElement && document.activeElement.blur(),
      ),
    );
  const overflow = await page.locator("html").evaluate((html) => html.scrollWidth - html.clientWidth);
  if (overflow > 0) problems.push(`${name}: ${overflow} px wider than the window`);
  await page.screenshot({ path: join(out, `${name}.png`), fullPage: true });
  await page.close();
}

const icon = readFileSync(join(root, "public/icon.svg"), "utf8");
const fullBleed = icon.replace(' rx="6"', "");
for (const [file, size, svg] of [
  ["icon-192.png", 192, icon],
  ["icon-512.png", 512, icon],
  ["icon-maskable-512.png", 512, fullBleed],
  ["apple-touch-icon.png", 180, fullBleed],
] as const) {
  const page = await browser.newPage({ viewport: { width: size, height: size } });
  await page.setContent(`<style>body{margin:0}svg{display:block;width:100vw;height:100vh}</style>${svg}`);
  await page.screenshot({ path: join(out, file), omitBackground: true });
  await page.close();
}

await browser.close();
await site.close();
console.log(problems.length > 0 ? problems.join("\n") : "No problems.");
