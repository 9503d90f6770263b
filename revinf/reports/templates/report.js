"use strict";
(() => {
  const byId = (id) => document.getElementById(id);
  const controls = byId("controls"), slider = byId("prior-slider"), typed = byId("prior-value");
  const reset = byId("prior-reset"), said = byId("prior-said"), paper = byId("prior-on-paper");
  const asked = said.textContent, first = { slider: slider.value, typed: typed.value };

  // Written as the rest of revinf writes a probability: three decimals, never rounded to 0 or 1, and a tie
  // (only odd sixteenths can be one) goes to the even digit.
  const written = (value) => {
    if (value === 0 || value === 1) return String(value);
    if (value < 0.0005) return "<0.001";
    if (value >= 0.9995) return ">0.999";
    const tie = Number.isInteger(value * 16) && (value * 16) % 2 === 1;
    if (!tie) return value.toFixed(3);
    const down = Math.floor(value * 1000);
    return ((down % 2 === 0 ? down : down + 1) / 1000).toFixed(3);
  };
  const after = (prior, ratio) => 1 / (1 + (1 - prior) / prior / ratio);
  const marked = (selector) => Array.from(document.querySelectorAll(selector), (element) => ({
    element,
    middle: Number(element.dataset.middle), low: Number(element.dataset.low), high: Number(element.dataset.high),
    prior: Number(element.dataset.prior),
    part: (name) => element.querySelector(name),
  }));
  const texts = marked("[data-posterior]"), curves = marked("[data-curve]"), strips = marked("[data-strip]");
  const priors = Array.from(document.querySelectorAll("[data-prior-shown]"), (element) => ({ element, text: element.textContent }));
  const set = (element, values) => { for (const name in values) element.setAttribute(name, values[name]); };

  const show = (choose) => {
    for (const item of texts) {
      const prior = choose(item), p = (ratio) => written(after(prior, ratio));
      item.element.textContent = `${p(item.middle)} (${p(item.low)}–${p(item.high)})`;
    }
    for (const item of curves) {
      const prior = choose(item), x = 100 * prior, y = (ratio) => 100 - 100 * after(prior, ratio);
      set(item.part(".at"), { x1: x, x2: x, y1: y(item.low), y2: y(item.high) });
      set(item.part(".dot"), { cx: x, cy: y(item.middle) });
    }
    for (const item of strips) {
      const prior = choose(item), x = (ratio) => 100 * after(prior, ratio);
      set(item.part(".tick"), { x1: 100 * prior, x2: 100 * prior });
      set(item.part(".bar"), { x1: x(item.low), x2: x(item.high) });
      set(item.part(".dot"), { cx: x(item.middle) });
    }
  };
  const move = (prior) => {
    show(() => prior);
    for (const item of priors) item.element.textContent = written(prior);
    typed.removeAttribute("aria-invalid");
    slider.setAttribute("aria-valuetext", written(prior));
    paper.hidden = false;
    paper.textContent = said.textContent = `All posteriors stand at a prior of ${prior}. Advice, wordings and cautions stay those of the prior asked.`;
  };

  slider.addEventListener("input", () => {
    const prior = Number(slider.value) / 100;
    typed.value = String(prior);
    move(prior);
  });
  const read = () => {
    const text = typed.value.trim();
    const prior = /^(\d+([.,]\d*)?|[.,]\d+)(e-?\d+)?$/i.test(text) ? Number(text.replace(",", ".")) : NaN;
    if (!(prior > 0 && prior < 1)) {
      typed.setAttribute("aria-invalid", "true");
      said.textContent = "A prior lies strictly between 0 and 1, such as 0.5; the numbers stay as they were.";
      return;
    }
    slider.value = String(Math.min(99, Math.max(1, Math.round(100 * prior))));
    move(prior);
  };
  typed.addEventListener("change", read);
  controls.addEventListener("submit", (event) => { event.preventDefault(); read(); });
  reset.addEventListener("click", () => {
    show((item) => item.prior);
    for (const item of priors) item.element.textContent = item.text;
    slider.value = first.slider;
    typed.value = first.typed;
    typed.removeAttribute("aria-invalid");
    slider.removeAttribute("aria-valuetext");
    said.textContent = asked;
    paper.hidden = true;
  });
  controls.hidden = false;
})();
