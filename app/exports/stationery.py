"""What slides are written on: our own light or dark paper, or the user's template with its layouts, colours and places."""

import io
import zipfile
from collections.abc import Callable, Mapping
from dataclasses import dataclass, replace
from typing import Any

from lxml import etree
from pptx import Presentation
from pptx.enum.chart import XL_CHART_TYPE
from pptx.enum.shapes import PP_PLACEHOLDER
from pptx.exc import PackageNotFoundError
from pptx.oxml.ns import qn
from pptx.presentation import Presentation as Deck
from pptx.slide import Slide, SlideLayout
from pptx.util import Emu, Inches

from analysis.refusals import TemplateUnusable
from app.exports import master, series, zips
from app.exports.master import Box, Inks, Places
from app.look import DESK, NIGHT, SLIDE, Look, at_night, contrast

TITLES = (PP_PLACEHOLDER.TITLE, PP_PLACEHOLDER.CENTER_TITLE)
FURNITURE = (PP_PLACEHOLDER.DATE, PP_PLACEHOLDER.FOOTER, PP_PLACEHOLDER.SLIDE_NUMBER)
MARGIN, GAP = 0.5, 0.12  # inches at the sides and between what stands on a slide
EVIDENCE_TALL, LEAST_TALL = 0.72, 2.4  # inches: two lines of evidence; the lowest body that is of use
RULE, FIELD = 0.2, 0.12  # how strong rules and fields are in the colours of a template
_THEME = "http://schemas.openxmlformats.org/drawingml/2006/main"
_PRESENTATION_14 = "{http://schemas.microsoft.com/office/powerpoint/2010/main}sectionLst"


@dataclass(frozen=True, eq=False)
class Stationery:
    """An empty deck, its layouts by the kind of content (tbl, chart, pic), and where and in which colours things stand."""

    deck: Deck
    layouts: Mapping[str, SlideLayout]
    places: Places
    inks: Inks
    look: Look
    place: Callable[[Slide], Any]  # where table, chart or picture is put
    words: Callable[[Slide], Any]  # the text frame of the evidence
    saved: Callable[[str], bytes]  # from the title


@dataclass(frozen=True, eq=False)
class Free:
    """A place on a slide without a placeholder, which takes content as a placeholder does."""

    slide: Slide
    box: Box

    def insert_table(self, rows: int, columns: int) -> Any:
        """Put a table there."""
        return self.slide.shapes.add_table(rows, columns, *self.box.emu())

    def insert_chart(self, kind: XL_CHART_TYPE, data: Any) -> Any:
        """Put a chart there."""
        return self.slide.shapes.add_chart(kind, *self.box.emu(), data)

    def insert_picture(self, file: io.BytesIO) -> Any:
        """Put a picture there."""
        return self.slide.shapes.add_picture(file, *self.box.emu())

    @property
    def element(self) -> Any:
        """What would be taken away if the place stayed empty: a shape of no size."""
        return self.slide.shapes.add_textbox(0, 0, 0, 0).element


def own(dark: bool) -> Stationery:
    """Return our own stationery."""
    deck, layouts = master.empty_deck()
    ground = NIGHT if dark else DESK
    look = replace(at_night(SLIDE) if dark else SLIDE, paper=ground.paper, small=SLIDE.text)
    inks, printed = inks_of(ground, look), inks_of(DESK, SLIDE)
    return Stationery(
        deck, layouts, Places(), inks, look,
        place=lambda slide: _numbered(slide, master.CONTENT),
        words=lambda slide: _numbered(slide, master.WORDS).text_frame,
        saved=lambda title: master.saved(deck, title, inks, printed),
    )  # fmt: skip


def _numbered(slide: Slide, number: int) -> Any:
    """Return the placeholder of a slide with this number; each kind of content has a class of its own."""
    return next(shape for shape in slide.placeholders if shape.placeholder_format.idx == number)


def inks_of(ground: Look, look: Look) -> Inks:
    """Return the colours of a deck from the look of the ground and that of what stands on it."""
    return Inks(
        paper=_digits(ground.paper), panel=_digits(ground.panel), field=_digits(ground.shades[0]), ink=_digits(look.ink),
        quiet=_digits(look.quiet), rule=_digits(ground.rule), accent=_digits(look.accent), levels=tuple(map(_digits, look.hues)),
    )  # fmt: skip


def _digits(colour: str) -> str:
    return colour.removeprefix("#")


def of(template: bytes) -> Stationery:
    """Return the user's own presentation without its slides; raises TemplateUnusable where it has no place for a title and content."""
    try:
        deck = Presentation(io.BytesIO(template))
    except (PackageNotFoundError, zipfile.BadZipFile, KeyError, ValueError) as fault:
        raise TemplateUnusable("it is not a presentation in the .pptx format") from fault
    _empty(deck)
    layout = _layout(deck)
    places = _places(deck, layout)
    inks = _inks_in(_theme(layout), layout)
    dark = contrast(f"#{inks.paper}", "#000000") < contrast(f"#{inks.paper}", "#FFFFFF")
    look = replace(at_night(SLIDE) if dark else SLIDE, small=SLIDE.text, paper=f"#{inks.paper}", ink=f"#{inks.ink}", rule=f"#{inks.rule}")
    return Stationery(
        deck, dict.fromkeys(master.CONTENTS, layout), places, inks, look,
        place=lambda slide: _free(slide, places),
        words=lambda slide: _words(slide, places, inks),
        saved=lambda title: zips.settled(master.named(deck, title)),
    )  # fmt: skip


def _empty(deck: Deck) -> None:
    """Take all slides out, and the list of sections that would still name them."""
    slides = deck.slides._sldIdLst
    for entry in list(slides):
        deck.part.drop_rel(entry.rId)
        slides.remove(entry)
    for sections in list(deck.element.iter(_PRESENTATION_14)):
        extension = sections.getparent()
        extension.getparent().remove(extension)


def _layout(deck: Deck) -> SlideLayout:
    """Return the layout with a title and the fewest other places."""
    titled = [layout for layout in deck.slide_layouts if any(p.placeholder_format.type in TITLES for p in layout.placeholders)]
    if not titled:
        raise TemplateUnusable("none of its layouts has a title")
    return min(titled, key=lambda layout: (len(_others(layout)), _title(layout).placeholder_format.type != PP_PLACEHOLDER.TITLE))


def _title(layout: SlideLayout) -> Any:
    return next(p for p in layout.placeholders if p.placeholder_format.type in TITLES)


def _others(layout: SlideLayout) -> list[Any]:
    return [p for p in layout.placeholders if p.placeholder_format.type not in (*TITLES, *FURNITURE)]


def _places(deck: Deck, layout: SlideLayout) -> Places:
    """Return the title's place, and what is free between it and the foot of the slide."""
    wide, tall = Emu(deck.slide_width).inches, Emu(deck.slide_height).inches
    title = _box(_title(layout))
    feet = [_box(p).top for p in layout.placeholders if p.placeholder_format.type in FURNITURE]
    foot = min([tall - MARGIN / 2, *(top for top in feet if top > tall / 2)])
    evidence = Box(MARGIN, foot - EVIDENCE_TALL, wide - 2 * MARGIN, EVIDENCE_TALL)
    top = title.top + title.tall + GAP
    body = Box(MARGIN, top, wide - 2 * MARGIN, evidence.top - GAP - top)
    if body.tall < LEAST_TALL:
        raise TemplateUnusable("below the title of its plainest layout there is no room for a table or figure")
    return Places(title, body, evidence)


def _box(shape: Any) -> Box:
    return Box(*(Emu(length or 0).inches for length in (shape.left, shape.top, shape.width, shape.height)))


def _free(slide: Slide, places: Places) -> Free:
    for shape in list(slide.placeholders):
        if shape.placeholder_format.type not in (*TITLES, *FURNITURE):
            shape.element.getparent().remove(shape.element)
    return Free(slide, places.body)


def _words(slide: Slide, places: Places, inks: Inks) -> Any:
    """Return a frame that writes its text in the quiet colour and the smallest type."""
    frame = slide.shapes.add_textbox(*places.evidence.emu()).text_frame
    frame.word_wrap = True
    frame.margin_left = frame.margin_right = frame.margin_top = frame.margin_bottom = Inches(0)
    return _Written(frame, inks)


class _Written:
    """A text frame whose text, once set, is dressed."""

    def __init__(self, frame: Any, inks: Inks) -> None:
        self._frame, self._inks = frame, inks

    @property
    def text(self) -> str:
        return str(self._frame.text)

    @text.setter
    def text(self, text: str) -> None:
        self._frame.text = text
        for run in self._frame.paragraphs[0].runs:
            series.write_in(run.font, self._inks.quiet)


def _theme(layout: SlideLayout) -> etree._Element:
    """Return the theme of a layout's master."""
    parts = layout.slide_master.part.rels.values()
    return etree.fromstring(next(rel.target_part.blob for rel in parts if rel.reltype.endswith("/theme")))


def _inks_in(theme: etree._Element, layout: SlideLayout) -> Inks:
    """Return the colours of a theme, ground and text as the master assigns them."""
    assigned = layout.slide_master.element.find(qn("p:clrMap")).attrib
    paper, ink, accent = (
        _colour(theme, assigned.get(role, slot)) for role, slot in (("bg1", "lt1"), ("tx1", "dk1"), ("accent1", "accent1"))
    )
    thin = {name: series.mixed(hue, paper, share) for name, hue, share in (("rule", ink, RULE), ("field", accent, FIELD))}
    quiet = series.mixed(ink, paper, 0.8)
    return Inks(paper=paper, panel=paper, ink=ink, quiet=quiet, accent=accent, levels=tuple(map(_digits, SLIDE.hues)), **thin)


def _colour(theme: etree._Element, slot: str) -> str:
    found = theme.find(f".//{{{_THEME}}}clrScheme/{{{_THEME}}}{slot}")
    told = found[0].get("lastClr") or found[0].get("val") if found is not None and len(found) else None
    return told.upper() if told and len(told) == 6 else _digits(DESK.ink)
