// What the program cannot do without, and nothing else: the yardstick of `run.mjs`.
import "elkjs/lib/elk.bundled.js";
import "pdfkit";
import "@svgdotjs/svg.js";
