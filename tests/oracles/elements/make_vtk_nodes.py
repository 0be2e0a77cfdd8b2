"""Writes vtk-nodes.csv: the parametric coordinates (0 to 1) of the nodes of each cell type, as VTK itself says.

Needs the package `vtk` (made with 9.7.2). Read by src/elements/tests.rs.
"""

import vtk

CELLS = {
    "tri3": vtk.vtkTriangle, "tri6": vtk.vtkQuadraticTriangle, "quad4": vtk.vtkQuad,
    "quad8": vtk.vtkQuadraticQuad, "quad9": vtk.vtkBiQuadraticQuad, "tet4": vtk.vtkTetra,
    "tet10": vtk.vtkQuadraticTetra, "hex8": vtk.vtkHexahedron, "hex20": vtk.vtkQuadraticHexahedron,
    "hex27": vtk.vtkTriQuadraticHexahedron, "wedge6": vtk.vtkWedge, "wedge15": vtk.vtkQuadraticWedge,
}
with open("vtk-nodes.csv", "w", encoding="utf-8") as out:
    out.write("shape,node,a,b,c\n")
    for name, cell_type in CELLS.items():
        cell = cell_type()
        flat = cell.GetParametricCoords()
        for node in range(cell.GetNumberOfPoints()):
            out.write(f"{name},{node}," + ",".join(str(flat[3 * node + i]) for i in range(3)) + "\n")
