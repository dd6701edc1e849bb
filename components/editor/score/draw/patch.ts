/**
 * Makes one drawing equal to another by touching only what differs. A fret typed into a bar changes a head, a stem and a number;
 * the nodes around them keep their shaped text and their paint.
 */
export function patch(drawn: Element, wanted: Element): void {
  for (const { name, value } of wanted.attributes) if (drawn.getAttribute(name) !== value) drawn.setAttribute(name, value)
  if (drawn.attributes.length > wanted.attributes.length) {
    for (const { name } of [...drawn.attributes]) if (!wanted.hasAttribute(name)) drawn.removeAttribute(name)
  }
  if (!wanted.firstElementChild && !drawn.firstElementChild) {
    if (drawn.textContent !== wanted.textContent) drawn.textContent = wanted.textContent
    return
  }
  patchChildren(drawn, wanted)
}

function patchChildren(drawn: Element, wanted: Element): void {
  let here = drawn.firstElementChild
  for (let there = wanted.firstElementChild; there;) {
    const next = there.nextElementSibling
    const after: Element | null = here?.nextElementSibling ?? null
    if (!here) drawn.append(there)
    else if (here.tagName !== there.tagName) here.replaceWith(there)
    else if (!here.isEqualNode(there)) patch(here, there)
    there = next
    here = after
  }
  while (here) {
    const after: Element | null = here.nextElementSibling
    here.remove()
    here = after
  }
}
