"""The page as text: complete, escaped, self-contained. What a browser makes of it stands in test_browser."""

import base64
import hashlib
import re
from dataclasses import replace
from html.parser import HTMLParser

from flatprep.model.finding import Finding, Severity
from flatprep.report.html import bench_sheet_html, foldable, report_html


class Page(HTMLParser):
    """Elements with their attributes, and the text of each id's element is not needed here."""

    def __init__(self, text: str) -> None:
        super().__init__()
        self.elements: list[tuple[str, dict[str, str | None]]] = []
        self.words: list[str] = []
        self.feed(text)

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.elements.append((tag, dict(attrs)))

    def handle_data(self, data: str) -> None:
        self.words.append(data)

    def all(self, tag: str, **wanted: str) -> list[dict[str, str | None]]:
        named = {key.rstrip("_").replace("_", "-"): value for key, value in wanted.items()}
        return [a for t, a in self.elements if t == tag and named.items() <= a.items()]


def ticks(page: Page) -> list[str | None]:
    """Keys of the steps' tick boxes; the kit list has its own."""
    return [a["data-tick"] for a in page.all("input", type="checkbox") if "data-kit" not in a]


def test_every_part_finding_step_and_sheet_is_there(bundle):
    page = Page(report_html(bundle))
    assert len(page.all("article", class_="part")) == 2
    assert len(page.all("article", class_="sheet-part")) == 1
    keys = [a["data-mark"] for a in page.all("tr") if "data-mark" in a]
    assert keys == ["f1", "f2", "f3", "s1", "s2", "s3", "s4"]
    assert len(ticks(page)) == 4
    text = " ".join(page.words)
    assert page.all("ul", class_="sheet-list")
    for words in (
        "2 × leaf",
        "rev. B 0123456789",
        "bad.dxf",
        "too large",
        "wheel hoe",
        "Clamp the part.",
        "Local rules come first.",
        "No feeds known",
    ):
        assert words in text


def test_every_mark_has_a_row_in_its_card(bundle):
    page = Page(report_html(bundle))
    rows = {a["data-mark"] for a in page.all("tr") if "data-mark" in a}
    marks = [a["data-mark"].split() for a in page.all("g") if "data-mark" in a]
    assert {key for keys in marks for key in keys} <= rows
    assert ["s3", "s4"] in marks


def test_nothing_is_fetched(bundle):
    text = report_html(bundle)
    page = Page(text)
    assert not page.all("img")
    assert not page.all("link")
    assert [a for a in page.all("script") if "src" in a] == []
    assert "url(" not in text
    assert "@import" not in text
    outside = [a["href"] for a in page.all("a") if not str(a["href"]).startswith(("#", "./"))]
    assert outside == []


def test_the_policy_names_style_and_script_by_their_hash_and_nothing_else(bundle):
    text = report_html(bundle)
    (policy,) = re.findall(r'Content-Security-Policy" content="([^"]+)"', text)
    assert policy.startswith("default-src 'none';")
    for element in ("style", "script"):
        (body,) = re.findall(rf"<{element}>(.*?)</{element}>", text, re.DOTALL)
        digest = base64.b64encode(hashlib.sha256(body.encode()).digest()).decode()
        assert f"{element}-src 'sha256-{digest}'" in policy
    assert "unsafe" not in policy
    assert not re.search(r"<[^>]+\sstyle=", text)


def test_markup_in_names_stays_text(bundle):
    hostile = '"><img src=x onerror=alert(1)><script>alert(1)</script>'
    finding = Finding("small-hole", Severity.ERROR, hostile, hostile, (1.0, 1.0), remedy=hostile, handles=(hostile,))
    card = replace(
        bundle.cards[0], name=hostile, drawing=hostile, material_name=hostile, note=hostile, findings=(finding,)
    )
    sheet = replace(
        bundle.layout.sheets[0],
        stock=hostile,
        placements=(replace(bundle.layout.sheets[0].placements[0], part=hostile),),
    )
    bad = replace(
        bundle, name=hostile, cards=(card,), layout=replace(bundle.layout, sheets=(sheet,)),
        files=(("a b&.dxf", hostile),),
        unreadable=((hostile, hostile),), assumed=(hostile,), cautions=(hostile,),
    )  # fmt: skip
    for text in (report_html(bad), bench_sheet_html(bad, card)):
        page = Page(text)
        assert not page.all("img")
        assert len(page.all("script")) == 1
        assert not [a for _, a in page.elements if any(key.startswith("on") for key in a)]
    assert "./a%20b%26.dxf" in report_html(bad)


def test_ticks_change_with_the_drawing_and_with_the_step_only(bundle):
    def made(one):
        return ticks(Page(report_html(one)))

    before = made(bundle)
    leaf, tray = bundle.cards
    assert made(replace(bundle, assumed=("another",))) == before
    assert not set(made(replace(bundle, cards=(replace(leaf, digest="ff"), tray)))) & set(before)
    other = replace(leaf, steps=(*leaf.steps[:3], replace(leaf.steps[3], size="12 H8")))
    assert made(replace(bundle, cards=(other, tray)))[:3] == before[:3]
    assert made(replace(bundle, cards=(other, tray)))[3] != before[3]


def test_questions_sides_kit_and_reasons_are_shown(bundle):
    words = " ".join(Page(report_html(bundle)).words)
    for known in (
        "Is the hole of 5 mm for M5?",
        "One face is countersunk.",
        "Reamer 12 H7",
        "straight after drilling",
        "Hole 9 mm for M8.",
    ):
        assert known in words


def test_places_are_said_once(bundle):
    leaf = bundle.cards[0]
    two = ((10.0, 10.0), (50.0, 10.0))
    steps = tuple(replace(step, at=two, count=2) for step in leaf.steps[2:])
    words = " ".join(Page(report_html(replace(bundle, cards=(replace(leaf, steps=steps),)))).words)
    assert words.count("At (10,\u00a010), (50,\u00a010).") == 1
    assert "Same places as step 3." in words


def test_lengths_follow_the_job_s_unit(bundle):
    text = report_html(replace(bundle, units="in"))
    assert "0.197\u00a0in" in text  # 5 mm
    assert "limit 0.236\u00a0in" in text  # 6 mm
    leaf = bundle.cards[0]
    spoilt = replace(leaf.steps[1], note="outside 100 x 50 mm", problem="over 25.4 mm", caution="no nearer than 5 mm")
    found = replace(leaf.findings[0], message="the allowance is 12.7 mm", remedy="leave 6.35 mm")
    full = replace(
        bundle,
        units="in",
        cards=(replace(leaf, steps=(spoilt,), findings=(found,), assumed=("a kerf of 0.254 mm",)),),
        assumed=("gaps up to 0.05 mm are joined",),
        cautions=("keep 300 mm away",),
    )
    words = " ".join(Page(report_html(full)).words).partition("flat parts")[2]
    for said in (
        "3.937 x 1.969 in",
        "1.000 in",
        "0.197 in",
        "0.500 in",
        "0.250 in",
        "0.0100 in",
        "0.002 in",
        "11.811 in",
    ):
        assert said in words, said


def test_long_names_may_be_broken_where_their_words_end():
    assert foldable("a_long-name/of.dxf#1") == "a_<wbr>long-<wbr>name/<wbr>of.<wbr>dxf#<wbr>1"
    assert foldable("<b>__x") == "&lt;b&gt;__<wbr>x"
    assert foldable("") == ""


def test_the_same_bundle_gives_the_same_page(bundle):
    assert report_html(bundle) == report_html(bundle)


def test_a_bench_sheet_is_one_part_with_job_revision_and_hash(bundle):
    text = bench_sheet_html(bundle, bundle.cards[0])
    page = Page(text)
    assert len(page.all("article", class_="part")) == 1
    words = " ".join(page.words)
    for known in ("0123456789", "wheel hoe, rev. B", "Ream 12 H7", "Cut beforehand ⌀ 11.5\u00a0mm", "Clamp the part."):
        assert known in words


def test_without_prices_there_is_no_column_of_them(bundle):
    assert "Share of cost" in report_html(bundle)
    cards = tuple(replace(card, estimate=None) for card in bundle.cards)
    assert "Share of cost" not in report_html(replace(bundle, cards=cards))


def test_an_empty_job_still_makes_a_page(bundle):
    empty = type(bundle)("nothing")
    assert "Nothing found against cutting" in report_html(empty)


def test_a_report_of_200_parts_stays_small(many):
    assert len(report_html(many(200)).encode()) < 5_000_000
