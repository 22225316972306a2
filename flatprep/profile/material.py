"""A material: family, density, what may cut it, how it bends and takes a thread."""

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Material:
    """A material profile.

    Attributes
    ----------
    id : str
        What `--material` names it by: file stem, such as ``al-5052-h32``.
    aliases : tuple of str
        Common designations, compared without case, spaces and hyphens.
    family : str
        The key of a process's limits: ``low-carbon-steel``, ``stainless``, ``aluminium``, ``wear-plate``,
        ``copper-brass``, ``plastic``, ``wood``, ...
    density_kg_m3 : float or None
    face_grain : bool
        Plywood and the like: turns default to [0, 180].
    """

    id: str
    name: str
    family: str
    density_kg_m3: float | None
    aliases: tuple[str, ...] = ()
    face_grain: bool = False
    source: str = ""
