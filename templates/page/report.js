"use strict";
// Filters and sorts the table of gaps. Without this script the table is simply whole.
(function () {
  const table = document.getElementById("gap-table");
  const form = document.getElementById("gap-filter");
  if (!table || !form) { return; }
  const body = table.tBodies[0];
  const rows = Array.from(body.rows);
  const said = document.getElementById("gap-count");
  form.hidden = false;
  function count() {
    const shown = rows.filter(function (row) { return !row.hidden; }).length;
    said.textContent = shown + " of " + rows.length + " gaps shown";
  }
  function filter() {
    rows.forEach(function (row) {
      row.hidden = Array.from(form.elements).some(function (choice) {
        return choice.name && choice.value && row.dataset[choice.name] !== choice.value;
      });
    });
    count();
  }
  form.addEventListener("change", filter);
  form.addEventListener("reset", function () { window.setTimeout(filter, 0); });
  Array.from(table.tHead.rows[0].cells).forEach(function (head, index) {
    const words = head.textContent;
    const button = document.createElement("button");
    button.type = "button";
    button.textContent = words;
    head.textContent = "";
    head.appendChild(button);
    button.addEventListener("click", function () {
      const up = head.getAttribute("aria-sort") !== "ascending";
      Array.from(table.tHead.rows[0].cells).forEach(function (other) { other.removeAttribute("aria-sort"); });
      head.setAttribute("aria-sort", up ? "ascending" : "descending");
      rows.slice().sort(function (a, b) {
        const order = a.cells[index].textContent.localeCompare(b.cells[index].textContent, "en");
        return up ? order : -order;
      }).forEach(function (row) { body.appendChild(row); });
    });
  });
  count();
}());
