"""SVG elements as text, every attribute escaped: names in drawings are strangers' text."""

from html import escape

from flatprep.report.figures import number


def tag(element: str, content: str = "", /, **attributes: str | float) -> str:
    """One element.

    Parameters
    ----------
    element
        Its name, such as ``rect``.
    content
        What stands in it: elements, or text that the caller has escaped.
    attributes
        ``font_size`` becomes ``font-size`` and ``class_`` ``class``; floats are written to 0.001.
    """
    words = "".join(f' {_name(key)}="{_value(value)}"' for key, value in attributes.items())
    return f"<{element}{words}>{content}</{element}>" if content else f"<{element}{words}/>"


def text(words: str, x: float, y: float, size: float, **attributes: str | float) -> str:
    """Text whose baseline starts (or, by the page's style, is centred) at x, y; `size` in drawing units."""
    return tag("text", escape(words), x=x, y=y, font_size=size, **attributes)


def picture(content: str, view: tuple[float, float, float, float], *, css: str, label: str, role: str = "img") -> str:
    """``<svg>`` element showing x, y, width, height of `view`, y downwards."""
    box = " ".join(number(v, 3) for v in view)
    return tag("svg", content, xmlns="http://www.w3.org/2000/svg", class_=css, viewBox=box, role=role, aria_label=label)


def _name(key: str) -> str:
    return key.rstrip("_").replace("_", "-")


def _value(value: str | float) -> str:
    return escape(value) if isinstance(value, str) else number(value, 3)
