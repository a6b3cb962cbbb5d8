#!/usr/bin/env python3
"""Show a field file as the real VTK library sees it, and fail where it complains.

    pip install vtk
    python validation/check_vtu.py FIELD.vtu

Prints the numbers of points and cells and every array with its range. Ends with status 1 when the reader warns,
when an array has the wrong length, when one that docs/field-file.md names is missing, or when a number is not finite.
"""
import math
import sys

from vtkmodules.vtkIOXML import vtkXMLUnstructuredGridReader

POINT_ARRAYS = {"psi_Wb_per_rad": 1, "A_phi_Wb_per_m": 1, "B_T": 3}
CELL_ARRAYS = {"B_T": 3, "H_A_per_m": 3, "J_phi_A_per_m2": 1, "energy_J_per_m3": 1, "region": 1}


def read(path):
    """The grid, and what the reader said."""
    said = []
    reader = vtkXMLUnstructuredGridReader()

    def hear(_caller, event, message):
        said.append(f"{event}: {message.strip()}")

    hear.CallDataType = "string0"
    for event in ("ErrorEvent", "WarningEvent"):
        reader.AddObserver(event, hear)
        if reader.GetReaderErrorObserver():
            reader.GetReaderErrorObserver().AddObserver(event, hear)
    reader.SetFileName(path)
    reader.Update()
    return reader.GetOutput(), said


def examine(attributes, kind, count, wanted):
    """Prints the arrays of one kind; returns what is wrong with them."""
    wrong = []
    arrays = {attributes.GetArrayName(i): attributes.GetArray(i) for i in range(attributes.GetNumberOfArrays())}
    for name in wanted.keys() - arrays.keys():
        wrong.append(f"{kind} array {name} is missing")
    for name, array in arrays.items():
        parts, tuples = array.GetNumberOfComponents(), array.GetNumberOfTuples()
        ranges = [array.GetRange(part) for part in range(parts)]
        text = ", ".join(f"{low:.6g} .. {high:.6g}" for low, high in ranges)
        print(f"{kind} {name}: {tuples} x {parts} {array.GetDataTypeAsString()}: {text}")
        if tuples != count:
            wrong.append(f"{kind} array {name}: {tuples} entries for {count} {kind}s")
        if parts != wanted.get(name, parts):
            wrong.append(f"{kind} array {name}: {parts} components, not {wanted[name]}")
        if not all(math.isfinite(end) for pair in ranges for end in pair):
            wrong.append(f"{kind} array {name}: not finite")
    return wrong


def main():
    if len(sys.argv) != 2:
        sys.exit(__doc__)
    grid, wrong = read(sys.argv[1])
    points, cells = grid.GetNumberOfPoints(), grid.GetNumberOfCells()
    print(f"{points} points, {cells} cells, bounds {grid.GetBounds()}")
    if points == 0 or cells == 0:
        wrong.append("no points or no cells")
    if {grid.GetCellType(i) for i in range(0, cells, max(1, cells // 1000))} - {5}:
        wrong.append("cells that are not triangles")
    wrong += examine(grid.GetPointData(), "point", points, POINT_ARRAYS)
    wrong += examine(grid.GetCellData(), "cell", cells, CELL_ARRAYS)
    for line in wrong:
        print("WRONG:", line)
    sys.exit(1 if wrong else 0)


if __name__ == "__main__":
    main()
