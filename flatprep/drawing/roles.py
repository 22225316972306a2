"""What the lines of a layer are for: said by the user, else guessed from the layer's name or linetype, and stated."""

import re
import unicodedata
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from itertools import pairwise

from flatprep.model.drawing import Role

# fmt: off
_WORDS: tuple[tuple[Role, str], ...] = (
    # in the languages that drawings come in: common practice, no standard names them; "*" stands for any ending
    (
        Role.BEND,
        """bend bends bending bendup benddown bendlin* fold folds folding foldlin* score scorelin* crease creases creaselin*
        biege biegung* biegelini* biegen biegekant* kantlini* abkant* falz falzlini* rilllini*
        pli plis pliage* plier pliure* pliegue* plegado* doblez dobleces doblado* doblar piega piegh* piegat* dobra dobras
        dobragem zetlijn* buiglijn* vouwlijn* giec* ohyb* bockning bocklinj* bukkelinj* taivut* hajlit* bukum гиб* сгиб* 曲げ 折弯 折彎""",
    ),
    (
        Role.MARK,
        """engrav* etch etched etching* mark marks marking* scribe* scribing* raster rastered halfcut kisscut lettering
        gravur* gravier* markier* beschrift* gravure* graver marquage* grabad* grabar marcado* marcatur* incision* gravac*
        gravar graveer* graver* grawer* gravir* gravering* gravoz* kaiver* kazima гравир* 刻印 雕刻
        text texts texte textes testo testi texto textos tekst* pocket* poc tasche taschen poche poches cajead*
        fillet fillets chamfer* countersink* counterbore* csk cbore spotface*""",
    ),
    (
        Role.IGNORE,
        """dim dims dimension* annotation* note notes notizen title titleblock* cartouche schriftfeld schriftkopf
        center centers centre centres centerlin* centreline* centermark* centremark* mittellini* mittelachs* tangent tangents
        bemass* masse cotation* cote cotes cota cotas quota quote quotatur* wymiar* rozmer* koty размер* 寸法 标注
        hidden verdeckt* unsichtbar* construction helper helpers hilfs* guideline* reference references defpoints
        hatch hatches hatching schraffur* viewport* phantom nocut""",
    ),
    (
        Role.CUT,
        """cut cuts cutting cutout cutouts outline* contour contours perimeter outer inner profile laser schnitt schneid* kontur
        aussenkontur innenkontur laserschnitt decoup* coupe corte cortes cortar taglio tagli snij* ciecie wyciec* rezan*
        skar* leik* vagas рез* контур* kesim 切断 切割""",
    ),
)
# fmt: on
_PATTERNS = tuple(
    (role, re.compile("|".join(re.escape(w).replace(r"\*", r"[^\W\d_]*") for w in words.split())))
    for role, words in _WORDS
)
"""In order of precedence."""
_WRITTEN_AS_ONE = re.compile("(?:laser|vector|cnc)(?=.)")
_LETTERS = str.maketrans({"ß": "ss", "ł": "l", "ø": "o", "æ": "ae", "ı": "i", "đ": "d"})
_SHORT = 2.5
"""A dash is short when another one of the pattern is longer by more than this factor; those of ISO 128-2 differ by 4."""
_LINETYPES = (
    # ISO 128-2: long-dashed dotted lines are centre lines, dashed ones hidden edges
    (re.compile(r"CENT(ER|RE)|DASHDOT|CHAIN|MITTE|ACAD_ISO(04|08|10)W"), Role.IGNORE, "centre line by its linetype"),
    (re.compile(r"PHANTOM|DIVIDE|ACAD_ISO(05|09|12)W"), Role.BEND, "bend or phantom line by its linetype (ISO 128)"),
    (
        re.compile(r"HIDDEN|DASHED|VERDECKT|ACAD_ISO0[23]W"),
        Role.MARK,
        "dashed, a hidden edge by its linetype (ISO 128)",
    ),
)


@dataclass(frozen=True, slots=True)
class Guess:
    """A role and why."""

    role: Role
    why: str


def role_of(layer: str, linetype: str, said: Mapping[str, Role], *, off: bool, pattern: Sequence[float] = ()) -> Guess:
    """Say what the lines of a layer and linetype are for.

    Parameters
    ----------
    layer, linetype
        As in the file.
    said
        Layer name -> role, from the user; names compare without case.
    off
        The layer is switched off or frozen.
    pattern
        The linetype's dashes, gaps (negative) and dots (0) in turn, as group codes 49 give them.
    """
    for name, role in said.items():
        if name.lower() == layer.lower():
            return Guess(role, "as said")
    if off and dict(_PATTERNS)[Role.CUT].fullmatch(_plain(layer)):
        return Guess(Role.CUT, f"its name is “{layer}”, though it is switched off or frozen")
    if off:
        return Guess(Role.IGNORE, "its layer is switched off or frozen")
    by_name = _by_name(layer)
    if by_name is not None and by_name.role is not Role.CUT:
        return by_name
    for named, role, why in _LINETYPES:
        if named.search(linetype.upper()):
            return Guess(role, why)
    return _by_pattern(pattern) or by_name or Guess(Role.CUT, "nothing says otherwise")


def _by_pattern(pattern: Sequence[float]) -> Guess | None:
    """Read a linetype as ISO 128-2 draws lines: its dashes tell what its name does not."""
    drawn = [size for size in pattern if size >= 0.0]
    if len(drawn) == len(pattern):
        return None  # without gaps
    short = sum(size * _SHORT < max(drawn, default=0.0) for size in drawn)
    if short == 0 or short == len(drawn):
        return Guess(Role.MARK, "its lines are dashed, as hidden edges are (ISO 128)")
    if short < 2 * (len(drawn) - short):
        return Guess(Role.IGNORE, "its lines are long and short dashes in turn, as centre lines are (ISO 128)")
    return Guess(Role.BEND, "its lines are long and two short dashes, as bends and phantom lines are (ISO 128)")


def _by_name(layer: str) -> Guess | None:
    words = _words(layer)
    for role, pattern in _PATTERNS:
        word = next((w for w in words if pattern.fullmatch(w)), None)
        if word is not None:
            return Guess(role, f"its layer's name says “{word}”")
    return None


def _words(layer: str) -> list[str]:
    """Words of a name in plain small letters; two that follow each other also as one, and without laser before."""
    words = re.findall(r"[^\W\d_]+", _plain(re.sub(r"([^\W\d_A-Z])([A-Z])", r"\1 \2", layer)))
    pairs = [a + b for a, b in pairwise(words)]
    return [*words, *pairs, *(_WRITTEN_AS_ONE.sub("", w, count=1) for w in words if _WRITTEN_AS_ONE.match(w))]


def _plain(name: str) -> str:
    letters = unicodedata.normalize("NFKD", name.lower().translate(_LETTERS))
    # marks of voice and the like are letters of their own in Japanese
    return unicodedata.normalize("NFC", "".join(c for c in letters if not "\u0300" <= c <= "\u036f"))
