for (const button of document.querySelectorAll("th button")) button.addEventListener("click", () => {
  const head = button.closest("th"), body = head.closest("table").tBodies[0], column = head.cellIndex;
  const turn = head.getAttribute("aria-sort") === "ascending" ? -1 : 1;
  for (const other of head.parentNode.cells) other.removeAttribute("aria-sort");
  head.setAttribute("aria-sort", turn === 1 ? "ascending" : "descending");
  const key = row => row.cells[column].dataset.value ?? row.cells[column].textContent;
  const order = (a, b) => {
    const x = key(a), y = key(b), n = Number(x) - Number(y);
    if ((x === "") !== (y === "")) return x === "" ? 1 : -1;
    return turn * (Number.isNaN(n) ? x.localeCompare(y) : n);
  };
  body.append(...[...body.rows].sort(order));
});
addEventListener("beforeprint", () => { for (const fold of document.querySelectorAll("details")) fold.open = true; });
