"""What gmsh is told before every mesh, so that nothing but this and the sizes shapes it."""

MESH_OPTIONS = {
    "Mesh.Algorithm": 6,  # frontal Delaunay
    "Mesh.MeshSizeFactor": 1.0,
    "Mesh.MeshSizeMin": 0.0,
    "Mesh.MeshSizeMax": 1e22,
    "Mesh.MeshSizeFromPoints": 0,
    "Mesh.MeshSizeExtendFromBoundary": 0,
    "Mesh.LcIntegrationPrecision": 1e-3,
    "Mesh.RandomSeed": 1,
    "Mesh.ElementOrder": 1,
    "Mesh.Optimize": 1,
    "Mesh.Smoothing": 0,  # smooth.py does it: gmsh would take ten times as long as for the mesh
    "General.NumThreads": 1,
}
