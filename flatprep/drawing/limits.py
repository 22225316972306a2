"""How much a drawing may hold before it is refused: named values, each with its reason."""

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class ReadLimits:
    """Caps on what one drawing may cost.

    Attributes
    ----------
    file_bytes
        A flat part of thousands of holes stays under 20 MB.
    entities
        After blocks are exploded; the largest sheet layouts seen hold some 6,000.
    vertices
        Of all curves together.
    block_depth
        Blocks inside blocks.
    coordinate_mm
        100 m: beyond it a float64 micrometre is still exact, but no sheet is that large.
    """

    file_bytes: int = 64_000_000
    entities: int = 200_000
    vertices: int = 1_000_000
    block_depth: int = 16
    coordinate_mm: float = 1e8


LIMITS = ReadLimits()
