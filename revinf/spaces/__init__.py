"""Millimetres, affines and regions: where a coordinate lies, and whether a region contains it.

Knows no terminal, no literature and no statistics. `xyz` are millimetres (x right, y anterior, z
superior), `ijk` voxel indices, *tenths* whole tenths of a millimetre. Only numpy is imported here;
nibabel and nilearn are imported by the functions that read images.
"""
