"use strict";
(() => {
  const all = (selector, from = document) => [...from.querySelectorAll(selector)];
  const job = document.documentElement.dataset.job;
  const say = document.getElementById("say");

  // ---- what is kept between visits; a browser that keeps nothing must not stop the page
  const memory = (() => {
    const key = "flatprep " + job;
    let kept = {};
    try { kept = JSON.parse(localStorage.getItem(key)) || {}; } catch { kept = {}; }
    return {
      get: (name) => kept[name],
      set: (name, value) => {
        if (value) kept[name] = value; else delete kept[name];
        try { localStorage.setItem(key, JSON.stringify(kept)); return true; } catch { return false; }
      },
    };
  })();

  // ---- light and dark
  const themes = { "": "dark", dark: "light", light: "" };
  const themeButton = document.getElementById("theme");
  const showTheme = (theme) => {
    if (theme) document.documentElement.dataset.theme = theme; else delete document.documentElement.dataset.theme;
    if (themeButton) themeButton.textContent = "Colours: " + (theme || "as the device");
  };
  showTheme(memory.get("theme") || "");
  if (themeButton) themeButton.addEventListener("click", () => {
    const next = themes[document.documentElement.dataset.theme || ""];
    memory.set("theme", next);
    showTheme(next);
  });

  // ---- a row lights its mark, a mark its rows
  for (const card of all(".part")) {
    let pinned = null;
    const linked = (keys) => all("[data-mark]", card).filter((e) => e.dataset.mark.split(" ").some((k) => keys.includes(k)));
    const light = (keys) => {
      for (const lit of all(".lit", card)) lit.classList.remove("lit");
      if (keys) for (const element of linked(keys)) element.classList.add("lit");
    };
    for (const element of all("[data-mark]", card)) {
      const keys = element.dataset.mark.split(" ");
      const pin = () => { pinned = pinned === element ? null : element; light(pinned ? keys : null); };
      element.addEventListener("pointerenter", () => light(keys));
      element.addEventListener("pointerleave", () => light(pinned && pinned.dataset.mark.split(" ")));
      element.addEventListener("focusin", () => light(keys));
      element.addEventListener("focusout", () => light(pinned && pinned.dataset.mark.split(" ")));
      element.addEventListener("click", (event) => { if (!event.target.closest("input, a")) pin(); });
      element.addEventListener("keydown", (event) => {
        if (event.target === element && (event.key === "Enter" || event.key === " ")) { event.preventDefault(); pin(); }
      });
    }
    card.addEventListener("keydown", (event) => { if (event.key === "Escape") { pinned = null; light(null); } });
  }

  // ---- ticks
  const ticks = all("input[data-tick]");
  const count = () => {
    for (const place of all("[data-count]")) {
      const own = ticks.filter((t) => place.dataset.count === "" ? !("kit" in t.dataset) : t.closest("#" + place.dataset.count));
      place.textContent = own.filter((t) => t.checked).length + " of " + own.length + " done";
    }
  };
  const show = (tick) => tick.closest("tr").classList.toggle("done", tick.checked);
  for (const tick of ticks) {
    tick.checked = Boolean(memory.get(tick.dataset.tick));
    show(tick);
    tick.addEventListener("change", () => {
      if (!memory.set(tick.dataset.tick, tick.checked ? 1 : 0)) say.textContent = "This browser keeps no ticks: print the page instead.";
      show(tick);
      count();
    });
  }
  count();

  // ---- search
  const search = document.getElementById("search");
  if (search) {
    const cards = all(".part");
    const found = document.getElementById("found");
    const find = () => {
      const words = search.value.toLowerCase().split(/\s+/).filter(Boolean);
      let shown = 0;
      for (const card of cards) {
        const hit = words.every((word) => card.dataset.words.includes(word));
        card.hidden = !hit;
        const row = document.getElementById("row-" + card.id);
        if (row) row.hidden = !hit;
        shown += hit;
      }
      for (const placed of all(".placed")) {
        placed.classList.toggle("lit", words.length > 0 && words.every((word) => placed.dataset.part.toLowerCase().includes(word)));
      }
      found.textContent = say.textContent = words.length ? shown + " of " + cards.length + " parts" : "";
    };
    search.addEventListener("input", find);
    search.addEventListener("keydown", (event) => {
      if (event.key === "Escape") { search.value = ""; find(); }
      if (event.key === "Enter") { const first = cards.find((card) => !card.hidden); if (first) first.scrollIntoView(); }
    });
    if (search.value) find();
  }

  // ---- sheets: pan, zoom, and the part under the pointer
  for (const part of all(".sheet-part")) {
    const view = part.querySelector(".sheet-view");
    const svg = view.querySelector("svg");
    const output = part.querySelector("output");
    const [x0, y0, w0, h0] = svg.getAttribute("viewBox").split(" ").map(Number);
    let [x, y, w] = [x0, y0, w0];
    const draw = () => {
      const h = w * h0 / w0;
      x = Math.min(Math.max(x, x0), x0 + w0 - w);
      y = Math.min(Math.max(y, y0), y0 + h0 - h);
      svg.setAttribute("viewBox", [x, y, w, h].join(" "));
      view.classList.toggle("near", w < w0 * 0.999);
    };
    const point = (cx, cy) => new DOMPoint(cx, cy).matrixTransform(svg.getScreenCTM().inverse());
    const zoom = (factor, px = x + w / 2, py = y + w * h0 / w0 / 2) => {
      const wider = Math.min(w0, Math.max(w0 / 40, w * factor));
      const k = wider / w;
      [x, y, w] = [px - (px - x) * k, py - (py - y) * k, wider];
      draw();
    };
    const acts = {
      "+": () => zoom(1 / 1.4), "=": () => zoom(1 / 1.4), "-": () => zoom(1.4), "0": () => { [x, y, w] = [x0, y0, w0]; draw(); },
      ArrowLeft: () => { x -= w / 10; draw(); }, ArrowRight: () => { x += w / 10; draw(); },
      ArrowUp: () => { y -= w / 10; draw(); }, ArrowDown: () => { y += w / 10; draw(); },
    };
    for (const button of all("button[data-act]", part)) button.addEventListener("click", () => acts[button.dataset.act]());
    view.addEventListener("keydown", (event) => {
      if (acts[event.key] && (w < w0 || !event.key.startsWith("Arrow"))) { event.preventDefault(); acts[event.key](); }
    });
    view.addEventListener("wheel", (event) => {
      if (!event.ctrlKey && !(w < w0 && view.matches(":focus"))) return;
      event.preventDefault();
      const p = point(event.clientX, event.clientY);
      zoom(event.deltaY > 0 ? 1.2 : 1 / 1.2, p.x, p.y);
    }, { passive: false });
    const fingers = new Map();
    view.addEventListener("pointerdown", (event) => { fingers.set(event.pointerId, event); });
    for (const end of ["pointerup", "pointercancel", "pointerleave"]) view.addEventListener(end, (event) => fingers.delete(event.pointerId));
    view.addEventListener("pointermove", (event) => {
      const before = fingers.get(event.pointerId);
      if (!before) return;
      const others = [...fingers.values()].filter((f) => f.pointerId !== event.pointerId);
      if (others.length) {
        const other = others[0];
        const gap = (e) => Math.hypot(e.clientX - other.clientX, e.clientY - other.clientY);
        const p = point((event.clientX + other.clientX) / 2, (event.clientY + other.clientY) / 2);
        zoom(gap(before) / Math.max(gap(event), 1), p.x, p.y);
      } else if (w < w0) {
        const [a, b] = [point(before.clientX, before.clientY), point(event.clientX, event.clientY)];
        x += a.x - b.x;
        y += a.y - b.y;
        draw();
      }
      fingers.set(event.pointerId, event);
    });
    svg.addEventListener("pointerover", (event) => {
      const placed = event.target.closest(".placed");
      output.textContent = placed ? placed.querySelector("title").textContent : "";
    });
  }
})();
