"""Coupons as one JSON document, ``flatprep-coupon/1``; figures in mm, unrounded."""

from collections.abc import Sequence

from flatprep.model.coupon import Coupon

SCHEMA = "flatprep-coupon/1"


def coupon_document(coupons: Sequence[Coupon], files: Sequence[str], cautions: Sequence[str]) -> dict[str, object]:
    """Return the document as plain values; a coupon of which nothing can be cut has no file."""
    return {
        "schema": SCHEMA,
        "coupons": [_coupon(one, file) for one, file in zip(coupons, files, strict=True)],
        "cautions": list(cautions),
    }


def _coupon(one: Coupon, file: str) -> dict[str, object]:
    return {
        "file": file or None,
        "material": one.material,
        "thickness_mm": one.thickness_mm,
        "process": one.process,
        "trials": [
            {
                "kind": str(t.kind),
                "mate": t.mate,
                "wanted_mm": t.wanted_mm,
                "sizes_mm": list(t.sizes_mm),
                "parts": list(t.parts),
            }
            for t in one.trials
        ],
        "left_out": list(one.left_out),
    }
