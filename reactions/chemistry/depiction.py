"""Structural formulas as SVG for a page.

Made for a strict content policy and for light and dark alike: no style attribute, no background,
everything in the colour of the text around it. An attachment point is a bond ending in a wavy line
(IUPAC, Graphical representation standards for chemical structure diagrams, Pure Appl. Chem. 2008,
80, 277; from memory), and what is bonded to the cage at two points is laid out as the ring that it
closes there.
"""

from __future__ import annotations

from xml.etree import ElementTree
from xml.sax.saxutils import escape, quoteattr

import numpy as np
from rdkit import Chem, rdBase
from rdkit.Chem import rdDepictor
from rdkit.Chem.Draw import rdMolDraw2D
from rdkit.Geometry import Point3D

from reactions.chemistry.attachment import group_formula
from reactions.chemistry.drawings import sanitised, unsanitised
from reactions.chemistry.structures import StructureError

MOST_ATOMS = 400
_SMALLEST, _LARGEST = 40, 2000
_BOND_LENGTH = 30  # pixels, where there is room
_NOT_NEEDED = {"class", "fill-rule", "stroke-opacity", "stroke-miterlimit"}


def depict(smiles: str, width: int = 300, height: int = 200, title: str = "") -> str:
    """Return the structural formula as an SVG element of ``width`` by ``height`` pixels (40–2000).

    ``title`` is what a screen reader says; by default the formula and the number of attachment
    points. Raises StructureError when the SMILES (or molfile) can't be read or drawn.
    """
    if not (_SMALLEST <= width <= _LARGEST and _SMALLEST <= height <= _LARGEST):
        raise ValueError(f"{width} × {height} pixels is outside {_SMALLEST} to {_LARGEST}.")
    with rdBase.BlockLogs():
        molecule = sanitised(unsanitised(smiles))
        if molecule.GetNumAtoms() > MOST_ATOMS:
            raise StructureError(
                f"The structure has {molecule.GetNumAtoms()} atoms, more than the {MOST_ATOMS} "
                "that can be drawn."
            )
        _lay_out(molecule, width, height)
        drawing = _drawn(molecule, width, height)
    parts = "".join(_plain(part) for part in ElementTree.fromstring(drawing))  # noqa: S314  (ours)
    label = title or _spoken(molecule)
    return (
        f'<svg xmlns="http://www.w3.org/2000/svg" width="{width}" height="{height}" '
        f'viewBox="0 0 {width} {height}" role="img" aria-label={quoteattr(label)}>'
        f"<title>{escape(label)}</title>{parts}</svg>"
    )


def _points(molecule: Chem.Mol) -> list[int]:
    return [atom.GetIdx() for atom in molecule.GetAtoms() if atom.GetAtomicNum() == 0]


def _lay_out(molecule: Chem.Mol, width: int, height: int) -> None:
    """Give the molecule flat coordinates, as if the cage carbons of an addend were bonded."""
    closed = Chem.RWMol(molecule)
    points = _points(molecule)
    if len(points) == 2:
        closed.AddBond(points[0], points[1], Chem.BondType.SINGLE)
        Chem.FastFindRings(closed)
    rdDepictor.Compute2DCoords(closed)
    molecule.RemoveAllConformers()
    molecule.AddConformer(Chem.Conformer(closed.GetConformer()), assignId=True)
    if points:
        _turn(molecule, points, width / height)


def _turn(molecule: Chem.Mol, points: list[int], aspect: float) -> None:
    """Turn the drawing so that addends line up: the cage on the left, or below where that fits."""
    conformer = molecule.GetConformer()
    places = np.array(conformer.GetPositions())[:, :2] @ (1, 1j)
    if len(points) == 2:
        towards_addend = (places[points[1]] - places[points[0]]) * 1j
    else:
        carrier = molecule.GetAtomWithIdx(points[0]).GetNeighbors()[0].GetIdx()
        towards_addend = places[carrier] - places[points[0]]
    turned = (places - places[points].mean()) * np.conj(towards_addend) / abs(towards_addend)
    if turned.real.mean() < 0:
        turned = -turned
    length, breadth = np.ptp(turned.real) + 1, np.ptp(turned.imag) + 1
    if min(aspect / length, 1 / breadth) < 0.9 * min(aspect / breadth, 1 / length):
        turned = turned * 1j
    for index, place in enumerate(turned):
        conformer.SetAtomPosition(index, Point3D(place.real, place.imag, 0.0))


def _drawn(molecule: Chem.Mol, width: int, height: int) -> str:
    drawer = rdMolDraw2D.MolDraw2DSVG(width, height)
    options = drawer.drawOptions()
    options.useBWAtomPalette()
    options.clearBackground = False  # type: ignore[assignment]
    options.dummiesAreAttachments = True  # type: ignore[assignment]
    options.fixedBondLength = _BOND_LENGTH  # type: ignore[assignment]
    options.includeMetadata = False  # type: ignore[assignment]
    drawer.DrawMolecule(rdMolDraw2D.PrepareMolForDrawing(molecule))
    drawer.FinishDrawing()
    return str(drawer.GetDrawingText())


def _plain(part: ElementTree.Element) -> str:
    """Return one shape of RDKit's drawing with presentation attributes in place of styles."""
    attributes = dict(part.attrib)
    for declaration in filter(None, attributes.pop("style", "").split(";")):
        name, _, value = declaration.partition(":")
        attributes[name.strip()] = value.strip()
    written = "".join(
        f" {name}={quoteattr('currentColor' if value.startswith('#') else value)}"
        for name, value in attributes.items()
        if name not in _NOT_NEEDED
    )
    return f"<{part.tag.rpartition('}')[2]}{written}/>"


def _spoken(molecule: Chem.Mol) -> str:
    points = len(_points(molecule))
    formula = group_formula(molecule)
    if not points:
        return f"Structural formula of {formula}"
    return f"Structural formula of {formula}, attached at {points} point{'s' * (points > 1)}"
