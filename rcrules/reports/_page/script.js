"use strict";
(() => {
  const texts = new Intl.Collator("en", { numeric: true });
  const key = (row, column) => {
    const cell = row.cells[column];
    return cell.dataset.sort === undefined ? cell.textContent.trim() : Number(cell.dataset.sort);
  };
  const order = (a, b) => (typeof a === "number" && typeof b === "number" ? a - b : texts.compare(a, b));

  const sort = (table, head) => {
    const descending = head.getAttribute("aria-sort") === "ascending";
    const rows = [...table.tBodies[0].rows].map((row) => [key(row, head.cellIndex), row]);
    rows.sort((a, b) => (descending ? order(b[0], a[0]) : order(a[0], b[0])));
    table.tBodies[0].append(...rows.map((pair) => pair[1]));
    for (const other of head.parentElement.cells) other.removeAttribute("aria-sort");
    head.setAttribute("aria-sort", descending ? "descending" : "ascending");
  };

  for (const table of document.querySelectorAll("table.sortable")) {
    for (const head of table.tHead.rows[0].cells) {
      const button = document.createElement("button");
      button.type = "button";
      button.textContent = head.textContent;
      button.addEventListener("click", () => sort(table, head));
      head.replaceChildren(button);
    }
  }

  for (const form of document.querySelectorAll("form.filter")) {
    const rows = [...document.getElementById(form.dataset.table).tBodies[0].rows];
    let found = null;
    const filter = () => {
      found ??= rows.map((row) => row.textContent.toLowerCase());
      const words = form.elements.text.value.toLowerCase().split(/\s+/).filter(Boolean);
      const chosen = ["outcome", "level"].filter((name) => form.elements[name] && form.elements[name].value);
      let shown = 0;
      rows.forEach((row, index) => {
        const fits = words.every((word) => found[index].includes(word)) && chosen.every((name) => row.dataset[name] === form.elements[name].value);
        row.hidden = !fits;
        shown += fits ? 1 : 0;
      });
      form.querySelector("output").textContent = `${shown} of ${rows.length} shown`;
    };
    form.addEventListener("input", filter);
    form.addEventListener("submit", (event) => event.preventDefault());
    form.hidden = false;
    form.querySelector("output").textContent = `${rows.length} of ${rows.length} shown`;
    if (form.elements.text.value || form.elements.outcome?.value || form.elements.level?.value) filter();
  }

  const store = document.getElementById("store");
  let bodies = null;
  const unpack = async () => {
    const bytes = Uint8Array.from(atob(store.textContent), (letter) => letter.charCodeAt(0));
    const plain = new Blob([bytes]).stream().pipeThrough(new DecompressionStream("gzip"));
    return JSON.parse(await new Response(plain).text());
  };
  const fill = async (block) => {
    const place = block.querySelector(":scope > .packed");
    if (!place) return;
    bodies ??= unpack();
    const body = (await bodies)[block.id];
    if (place.isConnected) place.outerHTML = body;
  };
  if (store) {
    document.addEventListener("toggle", (event) => event.target.open && fill(event.target), true);
    const near = new IntersectionObserver((seen) => {
      for (const { isIntersecting, target } of seen) {
        if (!isIntersecting) continue;
        near.unobserve(target);
        fill(target);
      }
    }, { rootMargin: "600px" });
    for (const place of document.querySelectorAll(".network > .packed")) near.observe(place.parentElement);
  }

  const open = () => {
    const target = document.getElementById(location.hash.slice(1));
    for (let at = target; at; at = at.parentElement) if (at.tagName === "DETAILS") at.open = true;
    if (!target) return;
    const show = (times) => {
      target.scrollIntoView();
      if (times) requestAnimationFrame(() => show(times - 1));
    };
    show(3);
  };
  addEventListener("hashchange", open);
  if (location.hash) open();

  let closed = [];
  addEventListener("beforeprint", () => {
    closed = [...document.querySelectorAll("details:not([open], .holds, .holds *):not(:has(> .packed))")];
    for (const item of closed) item.open = true;
  });
  addEventListener("afterprint", () => {
    for (const item of closed) item.open = false;
  });
})();
