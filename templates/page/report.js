"use strict";
// Filters and sorts the table of gaps; opens the part a link points into. Without this script all is there.
(function () {
  const table = document.getElementById("gap-table");
  const form = document.getElementById("gap-filter");
  if (!table || !form) { return; }
  const body = table.tBodies[0];
  const rows = Array.from(body.rows);
  const heads = Array.from(table.tHead.rows[0].cells);
  const said = document.getElementById("gap-count");
  let order = "";
  function count() {
    const shown = rows.filter(function (row) { return !row.hidden; }).length;
    said.textContent = shown + " of " + rows.length + " gaps shown" + order;
  }
  function mark() { // on paper only what was chosen
    form.parentElement.classList.toggle("filtered", Array.from(form.elements).some(function (choice) {
      return choice.name && choice.value;
    }));
  }
  function filter() {
    mark();
    rows.forEach(function (row) {
      row.hidden = Array.from(form.elements).some(function (choice) {
        return choice.name && choice.value && row.dataset[choice.name] !== choice.value;
      });
    });
    count();
  }
  function key(row, index) {
    const cell = row.cells[index];
    return cell.dataset.sort || cell.textContent;
  }
  function sort(head, index, words) {
    const up = head.getAttribute("aria-sort") !== "ascending";
    heads.forEach(function (other) { other.removeAttribute("aria-sort"); });
    head.setAttribute("aria-sort", up ? "ascending" : "descending");
    rows.slice().sort(function (a, b) {
      const found = key(a, index).localeCompare(key(b, index), "en");
      return up ? found : -found;
    }).forEach(function (row) { body.appendChild(row); });
    order = ", sorted by " + words.toLowerCase() + (up ? "" : ", backwards");
    count();
  }
  heads.forEach(function (head, index) {
    const words = head.textContent;
    const button = document.createElement("button");
    button.type = "button";
    button.textContent = words;
    head.dataset.words = words; // printed in place of the button, which is not repeated on each sheet
    head.textContent = "";
    head.appendChild(button);
    button.addEventListener("click", function () { sort(head, index, words); });
  });
  form.addEventListener("change", filter);
  form.addEventListener("submit", function (event) { event.preventDefault(); });
  form.addEventListener("reset", function () {
    heads.forEach(function (head) { head.removeAttribute("aria-sort"); });
    rows.forEach(function (row) { row.hidden = false; body.appendChild(row); });
    form.parentElement.classList.remove("filtered");
    order = "";
    count();
  });
  form.reset();
  form.hidden = false;
}());
// Shows one variant of a what-if beside the present choice; all were made before the page was written.
document.querySelectorAll("form.what-if").forEach(function (form) {
  const rows = Array.from(form.nextElementSibling.querySelector("tbody").rows);
  const choice = form.querySelector("select");
  form.addEventListener("change", function () {
    rows.forEach(function (row, index) {
      row.hidden = index > 0 && choice.value !== "" && choice.value !== String(index);
    });
  });
  form.reset();
  form.hidden = false;
});
(function () {
  function open() {
    const id = decodeURIComponent(window.location.hash.slice(1));
    const target = id && document.getElementById(id);
    const part = target && target.closest("details");
    if (part && !part.open) {
      part.open = true;
      target.scrollIntoView();
    }
  }
  window.addEventListener("hashchange", open);
  window.addEventListener("beforeprint", function () {
    document.querySelectorAll("details:not([open]):not(.many)").forEach(function (part) {
      part.dataset.closed = "";
      part.open = true;
    });
  });
  window.addEventListener("afterprint", function () {
    document.querySelectorAll("details[data-closed]").forEach(function (part) {
      delete part.dataset.closed;
      part.open = false;
    });
  });
  open();
}());
