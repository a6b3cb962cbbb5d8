"""Reads a .vtu file with the real VTK library and checks what a person would see: python3 check_vtu.py FILE.vtu"""

import math
import sys

from vtkmodules.vtkCommonCore import vtkObject  # noqa: F401
from vtkmodules.vtkIOXML import vtkXMLUnstructuredGridReader

POINT_ARRAYS = {"psi_Wb_per_rad": 1, "A_phi_Wb_per_m": 1, "B_T": 3}
CELL_ARRAYS = {"B_T": 3, "H_A_per_m": 3, "J_phi_A_per_m2": 1, "region": 1, "energy_J_per_m3": 1}
TRIANGLE = 5


def check_arrays(data, expected, entries, kind):
    for name, components in expected.items():
        array = data.GetArray(name)
        assert array is not None, f"{kind} array {name} is missing"
        found = (array.GetNumberOfTuples(), array.GetNumberOfComponents())
        assert found == (entries, components), f"{kind} array {name}: {found}"
        for component in range(components):
            low, high = array.GetRange(component)
            assert math.isfinite(low) and math.isfinite(high) and low <= high, f"{kind} array {name}: {low} {high}"
        print(f"{kind} {name}: {array.GetDataTypeAsString()} {array.GetRange(-1 if components > 1 else 0)}")


def main(path):
    complaints = []
    reader = vtkXMLUnstructuredGridReader()
    for event in ("ErrorEvent", "WarningEvent"):
        reader.AddObserver(event, lambda _, what: complaints.append(what))
    reader.SetFileName(path)
    reader.Update()
    grid = reader.GetOutput()
    assert not complaints, complaints
    points, cells = grid.GetNumberOfPoints(), grid.GetNumberOfCells()
    assert points > 100 and cells > 100, (points, cells)
    assert {grid.GetCellType(i) for i in range(cells)} == {TRIANGLE}
    assert grid.GetBounds()[0] >= 0, "the half section lies at r >= 0"
    check_arrays(grid.GetPointData(), POINT_ARRAYS, points, "point")
    check_arrays(grid.GetCellData(), CELL_ARRAYS, cells, "cell")
    assert grid.GetPointData().GetArray("B_T").GetRange(-1)[1] > 0, "a field of zero"
    print(f"{path}: {points} points, {cells} triangles, read without complaint")


if __name__ == "__main__":
    main(sys.argv[1])
