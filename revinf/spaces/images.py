"""Reads NIfTI images that mark places, without trusting them: every fault is one line."""

from __future__ import annotations

import gzip
import logging
import warnings
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path
from typing import Any

import numpy as np
from numpy.typing import NDArray

from revinf.exceptions import InputFileError, SpaceError
from revinf.spaces.voxels import checked_affine, voxel_sizes

__all__ = ["image_stem", "read_image"]

_LARGEST_VOXEL_MM = 20.0
_LONGEST_AXIS = 512


def image_stem(file: Path) -> str:
    """Return the name of an image file without its ending.

    Examples
    --------
    >>> image_stem(Path("left insula.nii.gz"))
    'left insula'
    """
    return file.name[: -len(".nii.gz" if file.name.lower().endswith(".nii.gz") else ".nii")]


def read_image(
    file: Path, what: str = "mask", *, nan_is_zero: bool = False
) -> tuple[NDArray[Any], NDArray[np.float64]]:
    """Read a NIfTI image that marks places.

    Parameters
    ----------
    file : pathlib.Path
        .nii or .nii.gz: 3-D, or 4-D with one volume; at most 512 voxels an axis of at most 20 mm.
    what : str, default "mask"
        What it should be, for the messages.
    nan_is_zero : bool, default False
        Statistical maps often hold NaN outside the brain; it then counts as 0.

    Returns
    -------
    (I, J, K) array
        Finite plain numbers.
    (4, 4) array
        Voxel indices to mm.

    Raises
    ------
    InputFileError
        If the file cannot be read as such an image, has no orientation or a singular one, or holds a
        value that is not finite.
    """
    import nibabel as nib

    if not file.name.lower().endswith((".nii", ".nii.gz")):
        raise InputFileError(f"the {what} must be a .nii or .nii.gz file; convert the image", path=file)
    if not file.is_file():
        raise InputFileError(f"there is no such file; give the path of the {what} image", path=file)
    try:
        # Headers with repairable faults make nibabel warn and log; the checks here replace that.
        with warnings.catch_warnings(), _silent("nibabel.global"):
            warnings.simplefilter("ignore")
            image = nib.load(file)
            if not isinstance(image, nib.Nifti1Image):
                raise InputFileError("is no NIfTI volume; export a 3-D image", path=file)
            affine = _checked_header(image, file, what)
            if file.name.lower().endswith(".gz"):
                _read_to_the_end(file)
            values = np.asanyarray(image.dataobj)
    except InputFileError:
        raise
    # A broken header can raise nearly anything, from OSError over zlib.error to MemoryError.
    except Exception as error:
        raise InputFileError(
            f"cannot be read as a NIfTI image ({type(error).__name__}), it may be cut off or of "
            "another format; save it again as .nii.gz",
            path=file,
        ) from None
    if values.dtype.kind not in "buif":
        raise InputFileError(
            f"voxels must be plain numbers, but are {values.dtype}; save the {what} as integers",
            path=file,
        )
    if nan_is_zero and values.dtype.kind == "f":
        values = np.where(np.isnan(values), 0, values)
    if not np.isfinite(values).all():
        raise InputFileError("voxels must be finite, but some are NaN or infinite; set them to 0", path=file)
    return values.reshape(values.shape[:3]), affine


@contextmanager
def _silent(name: str) -> Iterator[None]:
    """Keep a logger quiet; without its handlers alone, Python's handler of last resort would speak up."""
    logger = logging.getLogger(name)
    disabled, logger.disabled = logger.disabled, True
    try:
        yield
    finally:
        logger.disabled = disabled


def _read_to_the_end(file: Path) -> None:
    """Raise if a gzipped file is cut off or damaged: nibabel stops before the checksum at its end."""
    with gzip.open(file) as stream:
        while stream.read(2**20):
            pass


def _checked_header(image: Any, file: Path, what: str) -> NDArray[np.float64]:
    """Return the affine of an image after checking grid and orientation, before any voxel is read."""
    shape = tuple(int(length) for length in image.shape)
    if len(shape) not in (3, 4) or (len(shape) == 4 and shape[3] != 1):
        raise InputFileError(
            f"the {what} must be one 3-D volume, but the image has shape {shape}; extract one volume",
            path=file,
        )
    if not all(0 < length <= _LONGEST_AXIS for length in shape):
        raise InputFileError(
            f"a {what} may have 1 to {_LONGEST_AXIS} voxels an axis, but this image has shape {shape}; resample",
            path=file,
        )
    if int(image.header["qform_code"]) == 0 and int(image.header["sform_code"]) == 0:
        raise InputFileError(
            "the image does not say where it lies (qform and sform codes are 0); save it with an affine to MNI152",
            path=file,
        )
    try:
        affine = checked_affine(image.affine)
    except SpaceError as error:
        raise InputFileError(str(error), path=file) from None
    if not voxel_sizes(affine).max() <= _LARGEST_VOXEL_MM:
        raise InputFileError(
            f"voxels may measure up to {_LARGEST_VOXEL_MM:.0f} mm, but measure "
            f"{voxel_sizes(affine).max():.4g} mm; check the units of the image",
            path=file,
        )
    return affine
