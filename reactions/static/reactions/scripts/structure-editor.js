// Draws into a text field: opens a canvas editor beside each [data-structure-editor] and keeps its
// drawing and the field's SMILES the same. What is typed stays the truth: a text that the editor
// can't draw is left alone until the person draws.

const NEAR_PX = 26;
const BOND_PX = 36;
const NO_ELEMENT = 0; // drawn as “?”, written as *

const plainMarks = (smiles) => smiles.replaceAll(/\[(R\d+|\?|\*:\d+)\]/g, "*");

class StructureEditor {
  constructor(root) {
    this.root = root;
    this.field = root.querySelector("textarea, input");
    this.drawing = root.querySelector(".structure-drawing");
    this.canvas = root.querySelector("[data-canvas]");
    this.button = root.querySelector("[data-draw]");
    this.attachButton = root.querySelector("[data-attach]");
    this.words = root.querySelector("[data-say]");
    this.button.hidden = false;
    this.button.addEventListener("click", () => this.toggle());
    root.querySelector("[data-clear]").addEventListener("click", () => this.clear());
    this.attachButton?.addEventListener("click", () => this.setAttaching(!this.isAttaching));
    this.field.addEventListener("change", () => this.draw());
    for (const kind of ["pointerdown", "click"]) {
      this.canvas.addEventListener(kind, (event) => this.attach(event), true);
    }
  }

  get isAttaching() {
    return this.attachButton?.getAttribute("aria-pressed") === "true";
  }

  setAttaching(on) {
    this.attachButton?.setAttribute("aria-pressed", String(on));
    this.canvas.toggleAttribute("data-attaching", on);
    // Fits the drawing now, or the first attachment would do it, and a second press on the same
    // place would meet another atom.
    if (on && this.editor?.getMolecule().getAllAtoms()) this.editor.moleculeChanged();
  }

  async toggle() {
    const opens = this.drawing.hidden;
    this.drawing.hidden = !opens;
    this.button.setAttribute("aria-expanded", String(opens));
    this.button.textContent = opens ? "Close the drawing" : "Draw";
    if (!opens || this.editor) return;
    this.chemistry = await import("../parts/openchemlib.js");
    this.editor = new this.chemistry.CanvasEditor(this.canvas);
    this.fitForFingers();
    this.nameForReaders();
    this.draw();
    this.editor.setOnChangeListener((event) => {
      if (event.type === "molecule" && event.isUserEvent) this.write();
    });
  }

  // The editor's tools are small: larger where a finger or a glove presses them.
  fitForFingers() {
    const host = this.canvas.firstElementChild;
    const tools = host.shadowRoot.querySelector("canvas");
    const scale = window.matchMedia("(pointer: coarse)").matches ? 1.5 : 1;
    const { height } = tools.getBoundingClientRect();
    this.canvas.style.height = `${Math.ceil(height * scale) + 2}px`;
    host.style.width = host.style.height = `${100 / scale}%`;
    host.style.transform = `scale(${scale})`;
    host.style.transformOrigin = "0 0";
    host.shadowRoot.querySelector("div").style.minWidth = "0";
  }

  nameForReaders() {
    const [tools, area] = this.canvas.firstElementChild.shadowRoot.querySelectorAll("canvas");
    tools.setAttribute("role", "img");
    tools.setAttribute("aria-label", "Drawing tools, for the pointer");
    area.setAttribute("role", "application");
    area.setAttribute("aria-label", "Drawing area, for the pointer; the text field holds the same");
  }

  // The text into the drawing.
  draw() {
    if (!this.editor || this.field.value.trim() === this.written) return;
    const text = this.field.value.trim();
    try {
      const { Molecule } = this.chemistry;
      const molecule = /V[23]000|M {2}END/.test(text)
        ? Molecule.fromMolfile(this.field.value)
        : Molecule.fromSmiles(text);
      this.editor.setMolecule(molecule);
      this.written = text;
    } catch {
      this.editor.setMolecule(new this.chemistry.Molecule(8, 8));
      this.say("What is typed can't be drawn here; it stays as it is until you draw.");
    }
  }

  // The drawing into the text.
  write() {
    this.written = plainMarks(this.editor.getMolecule().toIsomericSmiles());
    this.field.value = this.written;
    this.field.dispatchEvent(new Event("input", { bubbles: true }));
    this.field.dispatchEvent(new Event("change", { bubbles: true }));
  }

  clear() {
    this.setAttaching(false);
    this.editor?.setMolecule(new this.chemistry.Molecule(8, 8));
    this.field.value = this.written = "";
    this.field.dispatchEvent(new Event("input", { bubbles: true }));
    this.field.dispatchEvent(new Event("change", { bubbles: true }));
  }

  // Puts an attachment point on the atom that was pressed, pointing to where there is room.
  attach(event) {
    if (!this.isAttaching || !this.editor) return;
    const area = this.canvas.firstElementChild.shadowRoot.querySelectorAll("canvas")[1];
    const frame = area.getBoundingClientRect();
    const scale = area.width / frame.width;
    const x = (event.clientX - frame.left) * scale;
    const y = (event.clientY - frame.top) * scale;
    if (x < 0 || y < 0) return; // the tools, which stay usable
    event.stopPropagation();
    event.preventDefault();
    if (event.type !== "pointerdown") return;
    const molecule = this.editor.getMolecule();
    const atom = nearestAtom(molecule, x, y, NEAR_PX * scale);
    if (atom < 0) {
      this.say("No atom is there; press on an atom, or between lines on a corner.");
      return;
    }
    this.bondToCage(molecule, atom, scale);
    this.say("Attached: “?” is the cage. Press another atom, or the same again for a second bond to it.");
  }

  bondToCage(molecule, atom, scale) {
    const [x, y] = [molecule.getAtomX(atom), molecule.getAtomY(atom)];
    const length = molecule.getAllBonds() ? molecule.getAverageBondLength() : BOND_PX * scale;
    const angle = widestGap(molecule, atom);
    const point = molecule.addAtom(NO_ELEMENT);
    molecule.setAtomX(point, x + length * Math.cos(angle));
    molecule.setAtomY(point, y + length * Math.sin(angle));
    molecule.addBond(atom, point, this.chemistry.Molecule.cBondTypeSingle);
    this.editor.moleculeChanged();
    this.write();
  }

  say(text) {
    this.words.textContent = text;
  }
}

function nearestAtom(molecule, x, y, within) {
  let nearest = -1;
  let least = within;
  for (let atom = 0; atom < molecule.getAllAtoms(); atom += 1) {
    if (molecule.getAtomicNo(atom) === NO_ELEMENT) continue; // the cage itself
    const away = Math.hypot(molecule.getAtomX(atom) - x, molecule.getAtomY(atom) - y);
    if (away < least) [nearest, least] = [atom, away];
  }
  return nearest;
}

// The direction in the middle of the widest angle between the bonds of an atom.
function widestGap(molecule, atom) {
  molecule.ensureHelperArrays(molecule.constructor.cHelperNeighbours);
  const angles = [];
  for (let place = 0; place < molecule.getAllConnAtoms(atom); place += 1) {
    const other = molecule.getConnAtom(atom, place);
    angles.push(
      Math.atan2(
        molecule.getAtomY(other) - molecule.getAtomY(atom),
        molecule.getAtomX(other) - molecule.getAtomX(atom),
      ),
    );
  }
  if (!angles.length) return 0;
  angles.sort((one, other) => one - other);
  let [widest, middle] = [-1, 0];
  angles.forEach((angle, place) => {
    const next = place + 1 < angles.length ? angles[place + 1] : angles[0] + 2 * Math.PI;
    if (next - angle > widest) [widest, middle] = [next - angle, (angle + next) / 2];
  });
  return middle;
}

function mount(within) {
  for (const root of within.querySelectorAll("[data-structure-editor]:not([data-mounted])")) {
    root.setAttribute("data-mounted", "");
    new StructureEditor(root);
  }
}

document.body.addEventListener("htmx:afterSettle", () => mount(document));
mount(document);
