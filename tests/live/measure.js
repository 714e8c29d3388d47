// Measures each frame: widths; the least contrast of a text against what is behind it; labels of charts
// that stand outside their chart or upon each other. One paragraph a frame, fields set apart by `;`.

// relative luminance and contrast: WCAG 2.2
const luminance = (colour) => {
  const [r, g, b] = colour.map((v) => (v / 255 <= 0.04045 ? v / 255 / 12.92 : ((v / 255 + 0.055) / 1.055) ** 2.4));
  return 0.2126 * r + 0.7152 * g + 0.0722 * b;
};
const contrast = (a, b) => {
  const [x, y] = [luminance(a), luminance(b)];
  return (Math.max(x, y) + 0.05) / (Math.min(x, y) + 0.05);
};
const parts = (colour) => (colour.match(/[\d.]+/g) || [0, 0, 0, 0]).map(Number);
const clear = (colour) => colour.length === 4 && colour[3] === 0;
const field = (text) => text.replaceAll(/[;<>&\s]+/g, ' ');

function ground(view, element) {
  for (let at = element; at; at = at.parentElement) {
    const colour = parts(view.getComputedStyle(at).backgroundColor);
    if (!clear(colour)) return colour.slice(0, 3);
  }
  return [255, 255, 255];
}

function faintest(view, page) {
  let least = [99, ''];
  const walk = page.createTreeWalker(page.body, NodeFilter.SHOW_TEXT);
  for (let node = walk.nextNode(); node; node = walk.nextNode()) {
    const element = node.parentElement;
    if (!node.data.trim() || !element.getClientRects().length) continue;
    const style = view.getComputedStyle(element);
    const colour = parts(element.closest('svg') ? style.fill : style.color).slice(0, 3);
    const ratio = contrast(colour, ground(view, element));
    if (ratio < least[0]) least = [ratio, node.data.trim()];
  }
  return least;
}

function labels(page) {
  const [outside, overlapping] = [[], []];
  for (const chart of page.querySelectorAll('svg')) {
    if (!chart.getClientRects().length) continue;
    const box = chart.getBoundingClientRect();
    const title = chart.querySelector('title').textContent;
    const texts = [...chart.querySelectorAll('text')].map((t) => [t.textContent, t.getBoundingClientRect()]);
    texts.forEach(([text, a], index) => {
      if (a.left < box.left - 1 || a.right > box.right + 1 || a.top < box.top - 2 || a.bottom > box.bottom + 2) {
        outside.push(`${title}: ${text}`);
      }
      for (const [other, b] of texts.slice(index + 1)) {
        const wide = Math.min(a.right, b.right) - Math.max(a.left, b.left);
        const high = Math.min(a.bottom, b.bottom) - Math.max(a.top, b.top);
        if (wide > 1 && high > 3) overlapping.push(`${title}: ${text}/${other}`);
      }
    });
  }
  return [outside.join(', '), overlapping.join(', ')];
}

onload = () => {
  for (const frame of document.querySelectorAll('iframe')) {
    const [page, view] = [frame.contentDocument, frame.contentWindow];
    const [ratio, text] = faintest(view, page);
    const { clientWidth, scrollWidth } = page.documentElement;
    const told = document.createElement('p');
    const fields = [ratio.toFixed(2), text, ...labels(page)].map(field);
    told.textContent = ['measured', frame.dataset.name, clientWidth, scrollWidth, ...fields].join(';');
    document.body.append(told);
  }
};
