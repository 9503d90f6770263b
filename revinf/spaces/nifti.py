"""A volume as the bytes of a compressed NIfTI file: the same numbers give the same bytes."""

from __future__ import annotations

import gzip
import zlib
from collections.abc import Iterable, Iterator
from typing import Any

import numpy as np
from numpy.typing import NDArray

__all__ = ["lattice_volume", "series_chunks", "volume_bytes"]


def lattice_volume(
    grid_tenths: NDArray[np.int16], spacing_tenths: int
) -> tuple[NDArray[np.int64], NDArray[np.float64]]:
    """Return where each point of a lattice stands in the smallest volume around it, and that volume's affine.

    Parameters
    ----------
    grid_tenths : (G, 3) int16 array, tenths of a millimetre
        Multiples of the spacing.
    spacing_tenths : int
        Of the lattice.

    Returns
    -------
    (G, 3) int64 array
        Voxel indices; the shape of the volume is their largest plus 1.
    (4, 4) array
        Voxel indices to mm.

    Examples
    --------
    >>> voxels, affine = lattice_volume(np.array([[-40, 0, 40], [0, 0, 80]], dtype=np.int16), 40)
    >>> voxels.tolist(), affine[:3, 3].tolist()
    ([[0, 0, 0], [1, 0, 1]], [-4.0, 0.0, 4.0])
    """
    cells = grid_tenths.astype(np.int64) // spacing_tenths
    corner = cells.min(axis=0)
    affine = np.diag([spacing_tenths / 10] * 3 + [1.0])
    affine[:3, 3] = corner * spacing_tenths / 10
    return cells - corner, affine


def volume_bytes(values: NDArray[Any], voxels: NDArray[np.int64], affine: NDArray[np.float64]) -> bytes:
    """Return a .nii.gz file in which the values stand at their voxels, and 0 everywhere else.

    Parameters
    ----------
    values : (G,) array
        Floats are kept as float64, so that no digit is lost; whole numbers as int32.
    voxels : (G, 3) int64 array
        Indices.
    affine : (4, 4) array
        Voxel indices to mm, MNI152.

    Returns
    -------
    bytes
        No clock in them.
    """
    import nibabel as nib

    kind = np.float64 if np.asarray(values).dtype.kind == "f" else np.int32
    volume = np.zeros(tuple(int(n) for n in voxels.max(axis=0) + 1), dtype=kind)
    volume[tuple(voxels.T)] = values
    image: Any = nib.Nifti1Image(volume, affine)  # type: ignore[no-untyped-call]
    image.header.set_xyzt_units("mm")
    image.set_sform(affine, code="mni")
    image.set_qform(affine, code="mni")
    plain: bytes = image.to_bytes()
    return gzip.compress(plain, compresslevel=6, mtime=0)


def series_chunks(
    rows: Iterable[NDArray[Any]], number: int, voxels: NDArray[np.int64], affine: NDArray[np.float64]
) -> Iterator[bytes]:
    """Yield, piece by piece, a .nii.gz file of many volumes, so that no more than one is held at a time.

    Parameters
    ----------
    rows : iterable of (G,) arrays of whole numbers
        The values of each volume at the voxels; elsewhere 0.
    number : int
        Of volumes.
    voxels, affine
        As for `volume_bytes`.

    Yields
    ------
    bytes
        Whole numbers of 32 bits, compressed; no clock in them.

    Examples
    --------
    >>> import nibabel as nib
    >>> rows = [np.array([3]), np.array([4])]
    >>> packed = b"".join(series_chunks(rows, 2, np.zeros((1, 3), dtype=np.int64), np.eye(4)))
    >>> nib.Nifti1Image.from_bytes(gzip.decompress(packed)).get_fdata().tolist()
    [[[[3.0, 4.0]]]]
    """
    import nibabel as nib

    shape = tuple(int(n) for n in voxels.max(axis=0) + 1)
    header: Any = nib.Nifti1Header()  # type: ignore[no-untyped-call]
    header.set_data_dtype(np.int32)
    header.set_data_shape((*shape, number))
    header.set_xyzt_units("mm")
    header.set_sform(affine, code="mni")
    header.set_qform(affine, code="mni")
    header["magic"] = b"n+1"
    header["vox_offset"] = 352
    # Low compression: the numbers are small and most voxels empty, so that more costs time and saves little.
    pack = zlib.compressobj(1, zlib.DEFLATED, 31)
    yield pack.compress(header.binaryblock + bytes(4))
    flat = np.ravel_multi_index(tuple(voxels.T), shape, order="F")
    volume = np.zeros(int(np.prod(shape)), dtype="<i4")
    for row in rows:
        volume[flat] = row
        yield pack.compress(volume.tobytes())
    yield pack.flush()
