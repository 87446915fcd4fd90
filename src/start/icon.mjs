// Draws media/icon.png: a curve, the polynomial that follows it near the point, and the range in which it holds. Run once after a change: node src/start/icon.mjs
import path from 'node:path';
import { launchBrowser } from './browser.mjs';
import { ROOT } from './workbench.mjs';

const SIZE = 256;
const toX = (x) => 128 + 88 * x;
const toY = (y) => 150 - 62 * y;
const curve = (f, from, to) =>
  Array.from({ length: 81 }, (_, i) => {
    const x = from + ((to - from) * i) / 80;
    return `${i === 0 ? 'M' : 'L'}${toX(x).toFixed(2)} ${toY(f(x)).toFixed(2)}`;
  }).join('');
const wave = (x) => Math.sin(2.2 * x);
const cubic = (x) => 2.2 * x - (2.2 * x) ** 3 / 6;
const picture = `<svg xmlns="http://www.w3.org/2000/svg" width="${SIZE}" height="${SIZE}" viewBox="0 0 256 256">
<defs><linearGradient id="ground" x1="0" y1="0" x2="0" y2="1"><stop offset="0" stop-color="#17486b"/><stop offset="1" stop-color="#0d2a40"/></linearGradient><clipPath id="inside"><rect x="20" y="20" width="216" height="216" rx="20"/></clipPath></defs>
<rect width="256" height="256" rx="52" fill="url(#ground)"/>
<g clip-path="url(#inside)">
<rect x="${toX(-0.78)}" y="20" width="${toX(0.78) - toX(-0.78)}" height="216" fill="#ffffff" opacity="0.09"/>
<path d="M24 150H232" stroke="#ffffff" stroke-opacity="0.35" stroke-width="4"/>
<path d="${curve(wave, -1.25, 1.25)}" fill="none" stroke="#7fd0ff" stroke-width="15" stroke-linecap="round"/>
<path d="${curve(cubic, -1.25, 1.25)}" fill="none" stroke="#ffb454" stroke-width="10" stroke-linecap="round" stroke-dasharray="1 19"/>
</g>
<circle cx="128" cy="150" r="14" fill="#ffffff"/>
</svg>`;

const browser = await launchBrowser();
if (!browser) {
  process.stderr.write('not run: no browser\n');
  process.exit(1);
}
const page = await browser.newPage({ viewport: { width: SIZE, height: SIZE } });
await page.setContent(`<body style="margin:0;background:transparent">${picture}</body>`);
await page.screenshot({ path: path.join(ROOT, 'media/icon.png'), omitBackground: true });
await browser.close();
