"""A part that stands upright in space, as programs for solids export one of its faces: laid flat."""

from contextlib import suppress
from math import inf
from typing import NamedTuple

import numpy as np
from ezdxf import bbox
from ezdxf.lldxf.const import DXFError
from ezdxf.math import BoundingBox, Matrix44, Vec3

from flatprep.drawing.load import Loaded

_DAMAGED = (ArithmeticError, AttributeError, DXFError, LookupError, RecursionError, TypeError, ValueError)
"""What ezdxf raises when it meets damaged entities, which it does only when they are touched."""
_THIN = 1e-6
"""A drawing that is thinner than this over its larger side lies in a plane."""


class LaidFlat(NamedTuple):
    """A document turned so that its plane is that of x and y, and the words that say so."""

    loaded: Loaded
    told: str


def laid_flat(whole: Loaded) -> LaidFlat | None:
    """Turn a drawing that stands in the plane of x and z, or y and z: it is then seen from the front, or the right.

    Parameters
    ----------
    whole
        With all entities in the document, which is changed.

    Returns
    -------
    LaidFlat or None
        None where it does not stand in one of these planes.
    """
    space = whole.document.modelspace()
    box = BoundingBox()
    with suppress(*_DAMAGED), np.errstate(all="ignore"):
        box = bbox.extents(space, fast=True)
    if not box.has_data or not 0.0 < max(box.size) < inf:
        return None
    thin = [side <= _THIN * max(box.size) for side in box.size]
    if thin == [False, True, False]:
        across, towards, view = Vec3(1, 0, 0), Vec3(0, -1, 0), f"y = {box.center.y:g}: taken as seen from the front"
    elif thin == [True, False, False]:
        across, towards, view = Vec3(0, 1, 0), Vec3(1, 0, 0), f"x = {box.center.x:g}: taken as seen from the right"
    else:
        return None
    turn = Matrix44.ucs(across, towards.cross(across), towards)
    turn.inverse()
    for entity in list(space):
        with (
            suppress(NotImplementedError, *_DAMAGED),
            np.errstate(all="ignore"),
        ):  # what cannot be turned draws no outline
            entity.transform(turn)
    return LaidFlat(whole, f"everything stands upright in the plane {view}")
