"""What our slides look like before anything stands on them: 16:9, paper and ink, a claim above, its evidence below."""

import io
import re
from dataclasses import dataclass
from typing import Any

from lxml import etree
from pptx import Presentation
from pptx.enum.shapes import PP_PLACEHOLDER
from pptx.oxml import parse_xml
from pptx.oxml.ns import qn
from pptx.presentation import Presentation as Deck
from pptx.shapes.base import BaseShape
from pptx.slide import Slide, SlideLayout
from pptx.util import Inches

from app.exports import zips

SMALLEST = 18  # points; nothing on a slide is smaller
CLAIM_SIZES = (32, 30, 28, 26, 24, 22, 20, SMALLEST)  # points, the largest that lets the claim fit
FACE = "Arial"  # on every office machine, its metric twin on the others; figures all of one width
_NAMESPACES = (
    'xmlns:a="http://schemas.openxmlformats.org/drawingml/2006/main" xmlns:p="http://schemas.openxmlformats.org/presentationml/2006/main"'
)


_MADE_BY = (
    b'<?xml version="1.0" encoding="UTF-8" standalone="yes"?>\n<Properties xmlns="http://schemas.openxmlformats.org/officeDocument/2006/'
    b'extended-properties"><Application>Crossgrain</Application></Properties>'
)


@dataclass(frozen=True)
class Box:
    """A place on the slide, in inches from its upper left corner."""

    left: float
    top: float
    wide: float
    tall: float

    def emu(self) -> tuple[int, int, int, int]:
        """Return left, top, width and height in the file's own unit."""
        return Inches(self.left), Inches(self.top), Inches(self.wide), Inches(self.tall)


SLIDE = Box(0, 0, 13.333, 7.5)
BAR = Box(0.6, 0.45, 0.09, 1.2)
CLAIM = Box(0.85, 0.45, 11.88, 1.2)
BODY = Box(0.6, 1.85, 12.13, 4.35)
EVIDENCE = Box(0.6, 6.3, 11.3, 0.8)
NUMBER = Box(12.0, 6.85, 0.73, 0.4)
CONTENTS = {"tbl": "table", "chart": "chart", "pic": "picture"}  # kinds of placeholders, as the file names them
CONTENT, WORDS = 10, 11  # numbers of the placeholders for the table or chart, and for the evidence


@dataclass(frozen=True)
class Places:
    """Where claim, content and evidence stand on a slide."""

    claim: Box = CLAIM
    body: Box = BODY
    evidence: Box = EVIDENCE


@dataclass(frozen=True)
class Inks:
    """The colours of a deck as six hexadecimal digits each."""

    paper: str
    panel: str
    field: str  # behind a count
    ink: str
    quiet: str
    rule: str
    accent: str
    levels: tuple[str, ...]


def _placeholder(number: int, name: str, ph: str, box: Box, style: str, prompt: str) -> etree._Element:
    """Write one placeholder of a layout."""
    left, top, wide, tall = box.emu()
    return parse_xml(
        f'<p:sp {_NAMESPACES}><p:nvSpPr><p:cNvPr id="{number}" name="{name}"/><p:cNvSpPr><a:spLocks noGrp="1"/></p:cNvSpPr>'
        f'<p:nvPr><p:ph {ph}/></p:nvPr></p:nvSpPr><p:spPr><a:xfrm><a:off x="{left}" y="{top}"/><a:ext cx="{wide}" cy="{tall}"/></a:xfrm>'
        f'<a:prstGeom prst="rect"><a:avLst/></a:prstGeom></p:spPr><p:txBody>{style}<a:p>{prompt}</a:p></p:txBody></p:sp>'
    )


def _style(points: int, colour: str, anchor: str = "t", bold: int = 0, align: str = "l") -> str:
    """Write how the text of a placeholder stands: flush with its box, one size, no bullets."""
    return (
        f'<a:bodyPr vert="horz" wrap="square" lIns="0" tIns="0" rIns="0" bIns="0" anchor="{anchor}"><a:noAutofit/></a:bodyPr>'
        f'<a:lstStyle><a:lvl1pPr marL="0" indent="0" algn="{align}"><a:lnSpc><a:spcPct val="100000"/></a:lnSpc><a:spcBef>'
        f'<a:spcPts val="0"/></a:spcBef><a:buNone/><a:defRPr sz="{points * 100}" b="{bold}"><a:solidFill><a:schemeClr val="{colour}"/>'
        "</a:solidFill></a:defRPr></a:lvl1pPr></a:lstStyle>"
    )


_TITLE = _style(CLAIM_SIZES[0], "tx1", anchor="ctr", bold=1)
_EVIDENCE = _style(SMALLEST, "tx2")
_NUMBER = _style(SMALLEST, "tx2", anchor="b", align="r")
_FIELD = '<a:fld id="{C1FF6DA9-008F-8B48-92A6-B652298478BF}" type="slidenum"><a:rPr lang="en-GB"/><a:t>‹#›</a:t></a:fld>'


def _bar(number: int) -> etree._Element:
    """Write the upright in the accent colour beside the claim."""
    left, top, wide, tall = BAR.emu()
    return parse_xml(
        f'<p:sp {_NAMESPACES}><p:nvSpPr><p:cNvPr id="{number}" name="Upright"/><p:cNvSpPr/><p:nvPr userDrawn="1"/></p:nvSpPr>'
        f'<p:spPr><a:xfrm><a:off x="{left}" y="{top}"/><a:ext cx="{wide}" cy="{tall}"/></a:xfrm><a:prstGeom prst="rect"><a:avLst/>'
        "</a:prstGeom>"
        '<a:solidFill><a:schemeClr val="accent1"/></a:solidFill><a:ln><a:noFill/></a:ln></p:spPr></p:sp>'
    )


def _text(words: str) -> str:
    return f'<a:r><a:rPr lang="en-GB"/><a:t>{words}</a:t></a:r>'


def _furnish(layout: SlideLayout, name: str, content: str) -> None:
    """Make a layout out of a claim, a table, chart or picture, a line of evidence and a number."""
    _clear(layout.shapes._spTree)
    layout.element.attrib.pop("type", None)
    layout.element.find(qn("p:cSld")).set("name", name)
    for shape in (
        _bar(2),
        _placeholder(3, "Claim", 'type="title"', CLAIM, _TITLE, _text("The claim in one sentence")),
        _placeholder(4, content.title(), f'type="{content}" idx="{CONTENT}"', BODY, _style(SMALLEST, "tx1"), _text("What shows it")),
        _placeholder(5, "Evidence", f'type="body" sz="quarter" idx="{WORDS}"', EVIDENCE, _EVIDENCE, _text("One line of evidence")),
        _placeholder(6, "Slide number", 'type="sldNum" sz="quarter" idx="12"', NUMBER, _NUMBER, _FIELD),
    ):
        layout.shapes._spTree.append(shape)


def _clear(tree: etree._Element) -> None:
    for shape in tree.findall(qn("p:sp")):
        tree.remove(shape)


def _furnish_master(deck: Deck) -> None:
    """Give the master the same places, so that a layout added by hand later looks alike."""
    tree = deck.slide_master.shapes._spTree
    _clear(tree)
    tree.append(_placeholder(2, "Claim", 'type="title"', CLAIM, _TITLE, _text("The claim in one sentence")))
    tree.append(_placeholder(3, "Text", 'type="body" idx="1"', BODY, _style(24, "tx1"), _text("Text")))
    tree.append(_placeholder(4, "Slide number", 'type="sldNum" sz="quarter" idx="4"', NUMBER, _NUMBER, _FIELD))


def empty_deck() -> tuple[Deck, dict[str, SlideLayout]]:
    """Return a presentation without slides, and its layouts by the placeholder that they hold: tbl, chart, pic."""
    deck = Presentation()
    deck.slide_width, deck.slide_height = Inches(SLIDE.wide), Inches(SLIDE.tall)
    layouts = dict(zip(CONTENTS, deck.slide_layouts, strict=False))
    for layout in list(deck.slide_layouts)[len(layouts) :]:
        deck.slide_layouts.remove(layout)
    _drop(deck, deck.part, "/printerSettings")
    _drop(deck, deck.part.package, "/thumbnail")
    _furnish_master(deck)
    for content, layout in layouts.items():
        _furnish(layout, f"Claim and {CONTENTS[content]}", content)
    return deck, layouts


def _drop(deck: Deck, owner: Any, kind: str) -> None:
    """Take a part out of the file that is of no use to us: the library's printer settings, its picture of an empty slide."""
    for relation in [relation for relation in deck.part.package.iter_rels() if relation.reltype.endswith(kind)]:
        owner.drop_rel(relation.rId)


def number(slide: Slide, layout: SlideLayout) -> None:
    """Put the layout's slide number on a slide, where it has one; new slides come without."""
    shape = next((shape for shape in layout.placeholders if shape.placeholder_format.type == PP_PLACEHOLDER.SLIDE_NUMBER), None)
    if shape is None:
        return
    copied = parse_xml(etree.tostring(shape.element))
    copied.find(qn("p:nvSpPr")).find(qn("p:cNvPr")).set("id", str(max(shape.shape_id for shape in slide.shapes) + 1))
    for run in copied.iter(qn("a:rPr")):
        run.set("sz", str(SMALLEST * 100))
    slide.shapes._spTree.append(copied)


def describe(shape: BaseShape, name: str, text: str) -> None:
    """Give a table or chart its name and its alternative text."""
    shape.name = name
    shape.element.xpath(".//p:cNvPr")[0].set("descr", text)


def _theme(old: bytes, inks: Inks) -> bytes:
    """Write our colours and typeface into the deck's theme, where every other colour of the deck looks them up."""
    levels = (*inks.levels, *([inks.quiet] * 5))[:5]
    colours = {"dk1": inks.ink, "lt1": inks.paper, "dk2": inks.quiet, "lt2": inks.panel, "accent1": inks.accent}
    colours |= {f"accent{k}": hue for k, hue in enumerate(levels, start=2)} | {"hlink": inks.accent, "folHlink": inks.quiet}
    theme = old.decode("utf-8")
    for slot, colour in colours.items():
        theme = re.sub(rf"<a:{slot}>.*?</a:{slot}>", f'<a:{slot}><a:srgbClr val="{colour}"/></a:{slot}>', theme)
    theme = re.sub(r'(<a:(?:major|minor)Font><a:latin typeface=)"[^"]*"', rf'\1"{FACE}"', theme)
    return re.sub(r'name="Office( Theme)?"', 'name="Crossgrain"', theme).encode("utf-8")


def named(deck: Deck, title: str) -> bytes:
    """Return the deck as a file with its title and nobody's name."""
    properties = deck.core_properties
    properties.title, properties.author, properties.comments, properties.last_modified_by = title, "", "", "Crossgrain"
    stream = io.BytesIO()
    deck.save(stream)
    return stream.getvalue()


def saved(deck: Deck, title: str, inks: Inks, for_notes: Inks) -> bytes:
    """Return the deck as a file, in our colours, named and undated; notes are printed, so their page has colours of its own."""
    file = named(deck, title)
    themes = {"ppt/theme/theme1.xml": inks, "ppt/theme/theme2.xml": for_notes}
    replaced = {name: _theme(zips.part(file, name), colours) for name, colours in themes.items()}
    return zips.settled(file, {**replaced, "docProps/app.xml": _MADE_BY})
