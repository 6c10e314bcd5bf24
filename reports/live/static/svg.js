// Elements of a drawing, made one by one: no text of a case is ever read as markup.
const SPACE = "http://www.w3.org/2000/svg";

export function shape(parent, name, attributes = {}, text) {
  const made = document.createElementNS(SPACE, name);
  for (const [key, value] of Object.entries(attributes)) {
    if (key === "style") made.style.cssText = value; else made.setAttribute(key, value); // the policy bars style in markup
  }
  if (text !== undefined) made.textContent = text;
  parent.append(made);
  return made;
}

// An empty drawing as wide as its place, with words for who cannot see it.
export function drawing(place, height, words) {
  const width = Math.max(280, place.clientWidth);
  const made = shape(document.createDocumentFragment(), "svg",
    { viewBox: `0 0 ${width} ${height}`, role: "img", "aria-label": words });
  place.replaceChildren(made);
  return [made, width];
}

export function element(name, attributes = {}, ...inside) {
  const made = document.createElement(name);
  for (const [key, value] of Object.entries(attributes)) {
    if (key in made && key !== "list") made[key] = value; else made.setAttribute(key, value);
  }
  made.append(...inside);
  return made;
}
