// Looks at a page as it is drawn and says what is wrong with it. view has the
// width of the window, the paper colour as the style sheet has it, and whether
// the page is drawn for print.
(view) => {
  const faults = new Set();
  const say = (text) => faults.add(text);
  const root = document.documentElement;
  const all = (selector, from = document) => [...from.querySelectorAll(selector)];
  const short = (text) => {
    const words = text.trim().replace(/\s+/g, " ");
    return words.length > 40 ? words.slice(0, 39) + "…" : words;
  };
  const name = (e) => {
    const classes = (e.getAttribute("class") || "").trim().split(/\s+/).filter(Boolean).map((c) => "." + c).join("");
    return e.tagName.toLowerCase() + (e.id ? "#" + e.id : "") + classes;
  };

  // Colours: [red, green, blue, alpha], 0 to 1.
  const probe = document.createElement("span");
  document.body.append(probe);
  const colour = (text) => {
    if (!colours.has(text)) colours.set(text, parsed(text));
    return colours.get(text);
  };
  const colours = new Map();
  const parsed = (text) => {
    const srgb = /^color\(srgb ([^)]*)\)$/.exec(text);
    const rgb = /^rgba?\(([^)]*)\)$/.exec(text);
    const parts = (srgb || rgb || ["", ""])[1].split(/[\s,/]+/).filter(Boolean).map(Number);
    if (parts.length < 3 || parts.some(Number.isNaN)) {
      say(`the colour "${text}" cannot be read`);
      return [0, 0, 0, 1];
    }
    const scale = srgb ? 1 : 255;
    return [parts[0] / scale, parts[1] / scale, parts[2] / scale, parts.length > 3 ? parts[3] : 1];
  };
  const resolve = (text) => {
    probe.style.color = "";
    probe.style.color = text;
    return probe.style.color === "" ? null : colour(getComputedStyle(probe).color);
  };
  const over = (top, under) => {
    const a = top[3];
    return [0, 1, 2].map((i) => top[i] * a + under[i] * (1 - a)).concat(1);
  };
  const faded = (c, by) => [c[0], c[1], c[2], c[3] * by];
  const hex = (c) => "#" + c.slice(0, 3).map((v) => Math.round(v * 255).toString(16).padStart(2, "0")).join("");
  // Relative luminance and contrast ratio: WCAG 2.1, definitions.
  const luminance = (c) => {
    const [r, g, b] = c.map((v) => (v <= 0.04045 ? v / 12.92 : ((v + 0.055) / 1.055) ** 2.4));
    return 0.2126 * r + 0.7152 * g + 0.0722 * b;
  };
  const contrast = (a, b) => {
    const [low, high] = [luminance(a), luminance(b)].sort((x, y) => x - y);
    return (high + 0.05) / (low + 0.05);
  };
  const kept = (of) => {
    const values = new Map();
    return (e) => {
      if (!values.has(e)) values.set(e, of(e));
      return values.get(e);
    };
  };
  const canvas = view.print ? [1, 1, 1, 1] : resolve("Canvas");
  const background = kept((e) => {
    if (!e) return canvas;
    const style = getComputedStyle(e);
    if (style.backgroundImage !== "none") say(`${name(e)} has a background picture, on which contrast is not known`);
    const c = colour(style.backgroundColor);
    return c[3] === 1 ? c : over(c, background(e.parentElement));
  });
  const opacity = kept((e) => (e ? Number(getComputedStyle(e).opacity) * opacity(e.parentElement) : 1));

  // The sheet: the page stands on the colour that the style sheet calls paper.
  const ground = background(document.body);
  const paper = resolve(view.paper);
  if (!paper) say(`the paper colour "${view.paper}" of the style sheet cannot be read`);
  else if (hex(paper) !== hex(ground)) say(`the page stands on ${hex(ground)}, and the style sheet calls ${hex(paper)} paper: is it loaded?`);

  // Width.
  const scrolls = (e) => {
    for (let at = e; at && at !== document.body; at = at.parentElement) {
      if (getComputedStyle(at).overflowX !== "visible") return true;
    }
    return false;
  };
  const overflow = (when) => {
    if (root.scrollWidth <= root.clientWidth) return;
    const wide = all("body *").filter((e) => {
      const r = e.getBoundingClientRect();
      const right = scrolls(e) ? r.right : Math.max(r.right, r.left + e.scrollWidth);
      return r.width > 0 && e.checkVisibility() && right > root.clientWidth + 0.5 && !scrolls(e.parentElement);
    });
    const inner = wide.filter((e) => !wide.some((o) => o !== e && e.contains(o))).slice(0, 3);
    say(`the page is ${root.scrollWidth} px wide in a window of ${root.clientWidth} px${when}: ${inner.map((e) => `${name(e)} "${short(e.textContent)}"`).join(", ") || "nothing stands out"}`);
  };
  if (!view.print) {
    overflow("");
    for (const d of all("details")) d.open = true;
    overflow(" with all details open");
  }

  // What every text stands on.
  const filled = kept((svg) =>
    all("rect, path, circle, ellipse, polygon", svg).flatMap((shape) => {
      const style = getComputedStyle(shape);
      if (style.fill === "none") return [];
      if (style.fill.startsWith("url(")) return [{ shape, from: shape.getScreenCTM().inverse() }];
      const fill = faded(colour(style.fill), Number(style.fillOpacity) * opacity(shape));
      return fill[3] > 0 ? [{ shape, fill, from: shape.getScreenCTM().inverse() }] : [];
    }));
  const shapesUnder = (text, bottom) => {
    const box = text.getBBox();
    const to = text.getScreenCTM();
    const shapes = filled(text.ownerSVGElement).filter((s) => s.shape.compareDocumentPosition(text) & Node.DOCUMENT_POSITION_FOLLOWING);
    return [0.05, 0.5, 0.95].map((share) => {
      const point = new DOMPoint(box.x + share * box.width, box.y + box.height / 2).matrixTransform(to);
      return shapes.reduce((under, s) => {
        if (!s.shape.isPointInFill(point.matrixTransform(s.from))) return under;
        if (!s.fill) say(`"${short(text.textContent)}" stands on a pattern, on which contrast is not known`);
        return s.fill ? over(s.fill, under) : under;
      }, bottom);
    });
  };
  const seen = new Set();
  const walker = document.createTreeWalker(document.body, NodeFilter.SHOW_TEXT);
  for (let node = walker.nextNode(); node; node = walker.nextNode()) {
    const e = node.parentElement;
    if (node.data.trim() === "" || e.closest("title, desc, style, script") || !e.checkVisibility({ visibilityProperty: true, contentVisibilityAuto: true })) continue;
    const range = document.createRange();
    range.selectNodeContents(node);
    if (![...range.getClientRects()].some((r) => r.width > 0 && r.height > 0)) continue;
    const style = getComputedStyle(e);
    const text = e.closest("svg text");
    let size = parseFloat(style.fontSize);
    let front, grounds;
    if (text) {
      const to = text.getScreenCTM();
      const scale = Math.sqrt(Math.abs(to.a * to.d - to.b * to.c));
      size *= scale;
      // Subscripts and superscripts are smaller than their line in any print.
      const line = parseFloat(getComputedStyle(text).fontSize) * scale;
      if (view.least && e.closest("figure") && line < view.least - 0.01) say(`"${short(text.textContent)}" in the figure ${name(text.ownerSVGElement)} is ${line.toFixed(1)} px high`);
      if (style.fontSizeAdjust !== "none") say(`the text of ${name(text.ownerSVGElement)} has font-size-adjust ${style.fontSizeAdjust}, which changes the measured size`);
      if (style.fill === "none") {
        say(`"${short(node.data)}" in ${name(e)} has no colour`);
        continue;
      }
      front = faded(colour(style.fill), Number(style.fillOpacity) * opacity(e));
      grounds = shapesUnder(text, background(text.ownerSVGElement));
    } else {
      front = faded(colour(style.color), opacity(e));
      grounds = [background(e)];
    }
    const large = size >= 24 || (size >= 18.66 && Number(style.fontWeight) >= 700);
    for (const under of grounds) {
      const mixed = over(front, under);
      const ratio = contrast(mixed, under);
      const key = name(e) + hex(mixed) + hex(under);
      if (ratio >= (large ? 3 : 4.5) || seen.has(key)) continue;
      seen.add(key);
      say(`contrast ${ratio.toFixed(2)}:1, wanted ${large ? 3 : 4.5}:1, of "${short(node.data)}" in ${name(e)}: ${hex(mixed)} on ${hex(under)}`);
    }
  }
  if (seen.size === 0 && document.body.innerText.trim() === "") say("the page shows no text");

  // Pictures.
  for (const e of all("img, svg")) {
    if (e.tagName === "IMG" && e.complete && e.naturalWidth === 0) say(`the picture ${e.getAttribute("src")} is not drawn`);
    if (!e.checkVisibility()) {
      if (!view.print) say(`${name(e)} is not shown`);
      continue;
    }
    const r = e.getBoundingClientRect();
    if (!(r.width > 0 && r.height > 0)) say(`${name(e)} has the size ${r.width} by ${r.height} px`);
  }

  if (view.print) {
    const links = all("body > header nav a");
    if (links.length === 0) say("the masthead has no navigation, so nothing could be hidden in print");
    for (const a of links) if (a.checkVisibility()) say(`the link "${short(a.textContent)}" of the masthead is printed`);
  }

  // The document itself.
  if (document.scripts.length > 0 || all("svg script").length > 0) say("the page has a script");
  for (const e of all("*")) {
    for (const a of e.attributes) if (/^on/i.test(a.name)) say(`${name(e)} has a script in ${a.name}`);
  }
  if (!root.lang) say("the page does not say its language");
  if (!document.title.trim()) say("the page has no title");
  const headings = all("h1, h2, h3, h4, h5, h6");
  const first = headings.filter((h) => h.tagName === "H1").length;
  if (first !== 1) say(`the page has ${first} headings h1`);
  let level = 0;
  for (const h of headings) {
    const at = Number(h.tagName[1]);
    if (at > level + 1) say(`the heading "${short(h.textContent)}" is h${at} behind ${level ? "h" + level : "nothing"}`);
    if (!h.textContent.trim()) say(`${name(h)} is empty`);
    level = at;
  }
  all("table").forEach((table, i) => {
    const which = `table ${i + 1} (${short(table.textContent)})`;
    // Markdown cannot write a caption: a table of the prose stands in a box with a name.
    const named = table.closest('[role=region][aria-label]');
    if (!named && (!table.caption || !table.caption.textContent.trim())) say(`${which} has no caption`);
    if (all("th", table).length === 0) say(`${which} has no head cells`);
    if (all("th:not([scope])", table).length > 0) say(`${which} has head cells without scope`);
  });
  for (const svg of all("svg")) {
    // A mark beside a word that says the same is hidden from screen readers.
    if (svg.getAttribute("aria-hidden") === "true" && !svg.closest("figure")) continue;
    if (![...svg.children].some((c) => c.tagName === "title" && c.textContent.trim())) say(`${name(svg)} has no title`);
  }
  for (const img of all("img:not([alt])")) say(`the picture ${img.getAttribute("src")} has no alternative text`);

  // Names and what points to them.
  const ids = all("[id]").map((e) => e.id);
  const known = new Set();
  for (const id of ids) {
    if (known.has(id)) say(`the id "${id}" stands twice`);
    known.add(id);
  }
  for (const e of all("*")) {
    for (const key of ["aria-labelledby", "aria-describedby", "aria-controls", "for", "headers"]) {
      for (const id of (e.getAttribute(key) || "").split(/\s+/).filter(Boolean)) {
        if (!known.has(id)) say(`${key} of ${name(e)} names "${id}", which is no id`);
      }
    }
    for (const a of e.attributes) {
      const used = /url\(["']?#([^"')]+)/.exec(a.value);
      if (used && !known.has(used[1])) say(`${a.name} of ${name(e)} uses "${used[1]}", which is no id`);
    }
  }
  const links = all("[href], [src]").map((e) => {
    const text = e.getAttribute("href") ?? e.getAttribute("src");
    return { text, url: new URL(text, document.baseURI).href };
  });
  probe.remove();
  return { faults: [...faults], ids, links };
}
