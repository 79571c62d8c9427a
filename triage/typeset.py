"""How this program drives WeasyPrint: import, fonts, what may be loaded, lettering, finished file.

WeasyPrint is imported inside functions only: its import costs more than assessing an incident.
Some functions reach into WeasyPrint 70 past its public names: `pdf.objects` and the tag tree, the
table of SVG elements, the writing of streams. A test with a validator guards each.
"""

import gc
import logging
import math
import os
import warnings
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from functools import cache
from importlib import import_module
from pathlib import Path
from types import ModuleType
from typing import Any
from urllib.parse import urlsplit
from urllib.request import url2pathname

from triage.errors import InvalidValue, MissingLibrary
from triage.paths import templates

MISSING_LIBRARY = (
    "PDF needs the system libraries pango and harfbuzz-subset, which are not installed. Debian: "
    "apt-get install --no-install-recommends libpango-1.0-0 libpangoft2-1.0-0 libharfbuzz-subset0"
)
OWN_FILES = frozenset({".css", ".svg", ".ttf"})
"""Kinds of file a document may load, from the templates folder only."""

UA_PART = b"""\
<rdf:Description rdf:about="" xmlns:pdfuaid="http://www.aiim.org/pdfua/ns/id/">
<pdfuaid:part>1</pdfuaid:part></rdf:Description>
<rdf:Description rdf:about="" xmlns:pdfaExtension="http://www.aiim.org/pdfa/ns/extension/"
 xmlns:pdfaSchema="http://www.aiim.org/pdfa/ns/schema#"
 xmlns:pdfaProperty="http://www.aiim.org/pdfa/ns/property#">
<pdfaExtension:schemas><rdf:Bag><rdf:li rdf:parseType="Resource">
<pdfaSchema:schema>PDF/UA identification</pdfaSchema:schema>
<pdfaSchema:namespaceURI>http://www.aiim.org/pdfua/ns/id/</pdfaSchema:namespaceURI>
<pdfaSchema:prefix>pdfuaid</pdfaSchema:prefix>
<pdfaSchema:property><rdf:Seq><rdf:li rdf:parseType="Resource">
<pdfaProperty:name>part</pdfaProperty:name>
<pdfaProperty:valueType>Integer</pdfaProperty:valueType>
<pdfaProperty:category>internal</pdfaProperty:category>
<pdfaProperty:description>Part of ISO 14289</pdfaProperty:description>
</rdf:li></rdf:Seq></pdfaSchema:property>
</rdf:li></rdf:Bag></pdfaExtension:schemas></rdf:Description>
"""
"""PDF/UA identifier, with the description PDF/A asks for any property foreign to it."""


@cache
def weasyprint() -> ModuleType:
    """Import WeasyPrint without its search for libraries through the compiler.

    The search costs a quarter of the import and is needed only where libraries carry unusual
    names; then it is let run.

    Raises:
        MissingLibrary: pango or its companions are not installed.
    """
    import ctypes.util

    search = ctypes.util.find_library
    ctypes.util.find_library = lambda name: None
    try:
        return import_module("weasyprint")
    except OSError:
        ctypes.util.find_library = search
        return _searching()
    finally:
        ctypes.util.find_library = search


def _searching() -> ModuleType:
    try:
        return import_module("weasyprint")
    except OSError as error:
        raise MissingLibrary(MISSING_LIBRARY) from error


@cache
def fonts() -> tuple[Any, Any]:
    """The package's faces and no other: WeasyPrint's font configuration, and its rules."""
    folder = templates() / "fonts"
    weasyprint()
    with _environ("FONTCONFIG_FILE", str(folder / "fonts.conf")):
        configuration = import_module("weasyprint.text.fonts").FontConfiguration()
    rules = weasyprint().CSS(
        filename=folder / "fonts.css",
        base_url=base_url(),
        font_config=configuration,
        url_fetcher=own_files(),
    )
    return configuration, rules


@cache
def covered() -> frozenset[str]:
    """Characters that both carried faces can draw."""
    face = templates() / "fonts" / "DejaVuSansCondensed.ttf"
    with import_module("fontTools.ttLib").TTFont(face, lazy=True) as font:
        return frozenset(map(chr, font.getBestCmap()))


@contextmanager
def _environ(name: str, value: str) -> Iterator[None]:
    """Set an environment variable for the time a C library reads it."""
    before = os.environ.get(name)
    os.environ[name] = value
    try:
        yield
    finally:
        if before is None:
            del os.environ[name]
        else:
            os.environ[name] = before


# --- what may be loaded -------------------------------------------------------------------------


def base_url() -> str:
    """The address that relative addresses in a document start from."""
    return templates().as_uri() + "/"


@cache
def own_files() -> Any:
    """A fetcher that opens files of the templates folder and stops the render at anything else."""
    weasyprint()
    urls = import_module("weasyprint.urls")

    class OwnFiles(urls.URLFetcher):  # type: ignore[misc, name-defined]
        def fetch(self, url: str, headers: dict[str, str] | None = None) -> Any:
            if not _is_own(url):
                raise urls.FatalURLFetchingError(url)
            return super().fetch(url, headers)

    return OwnFiles(allowed_protocols={"file"}, allow_redirects=False)


def _is_own(url: str) -> bool:
    parts = urlsplit(url)
    path = Path(url2pathname(parts.path)).resolve()
    local = parts.scheme == "file" and not parts.netloc
    return local and path.is_relative_to(templates().resolve()) and path.suffix in OWN_FILES


@contextmanager
def _uncollected() -> Iterator[None]:
    """Hold the collector while one document is made: it walks every box again and again (8 %)."""
    was_on = gc.isenabled()
    gc.disable()
    try:
        yield
    finally:
        if was_on:
            gc.enable()


@contextmanager
def guarded() -> Iterator[list[str]]:
    """Draw chart lettering whole, refuse foreign files, and keep what would only be logged.

    Returns:
        The renderer's remarks, filled while the block runs.

    Raises:
        InvalidValue: the document names a file or address that is not the package's own, or
            part of it could not be drawn: a report without its chart is not a report.
    """
    urls, elements = import_module("weasyprint.urls"), import_module("weasyprint.svg").TAGS
    stream = import_module("pydyf").Stream
    ear, logger, letters = _Ear(), logging.getLogger("weasyprint"), elements["text"]
    written = stream.data
    logger.addHandler(ear)
    elements["text"], stream.data = _lettering, property(_clearly_ended(written.fget))
    try:
        with _uncollected(), warnings.catch_warnings():
            warnings.simplefilter("ignore", ResourceWarning)  # it leaves its own profile open
            yield ear.heard
        if ear.faults:
            raise InvalidValue(f"a document could not be drawn whole: {'; '.join(ear.faults)}")
    except urls.FatalURLFetchingError as error:
        raise InvalidValue(f"a document may load the package's own files, not {error}") from error
    finally:
        elements["text"], stream.data = letters, written
        logger.removeHandler(ear)


class _Ear(logging.Handler):
    """Keeps remarks that nobody would see."""

    def __init__(self) -> None:
        super().__init__(logging.WARNING)
        self.heard: list[str] = []
        self.faults: list[str] = []

    def emit(self, record: logging.LogRecord) -> None:
        kept = self.faults if record.levelno >= logging.ERROR else self.heard
        kept.append(record.getMessage())


# --- lettering ----------------------------------------------------------------------------------


def _lettering(svg: Any, node: Any, font_size: float) -> None:
    """Draw one `<text>` of a chart in one run.

    WeasyPrint lays out every letter by itself, which takes nine times as long and leaves single
    letters in the text layer. Charts need no more than a place, an anchor and a weight.
    """
    if not node.text:
        return
    style = _style(svg, node, font_size)
    line = import_module("weasyprint.text.line_break")
    layout, _, _, width, _, baseline = line.split_first_line(
        node.text, style, svg.context, math.inf, 0
    )
    shift = {"middle": width / 2, "end": width}.get(node.get("text-anchor"), 0)
    layout.reactivate(style)
    drawing = import_module("weasyprint.draw.text")
    box = import_module("weasyprint.svg.text").TextBox(layout, style)
    box.baseline = baseline
    place = import_module("weasyprint.matrix").Matrix(
        d=-1, e=float(node.get("x")) - shift, f=float(node.get("y"))
    )
    svg.stream.push_state()
    svg.set_graphical_state(node, font_size)
    svg.stream.begin_text()
    drawing.draw_first_line(svg.stream, box, "none", "none", place)
    svg.stream.end_text()
    svg.stream.pop_state()


def _style(svg: Any, node: Any, font_size: float) -> Any:
    style = import_module("weasyprint.svg.text").Style()
    style.update(import_module("weasyprint.css.properties").INITIAL_VALUES)
    style.font_config = svg.font_config
    style["font_family"] = node.get("font-family").split(", ")
    style["font_weight"] = int(node.get("font-weight", 400))
    style["font_size"] = font_size
    return style


# --- the finished file --------------------------------------------------------------------------


def finish(_document: Any, pdf: Any) -> None:
    """Add what PDF/UA-1 beside PDF/A-3 lacks: identifier, plain XMP, direction of header cells."""
    for each in pdf.objects:
        extra = getattr(each, "extra", None) or {}
        if extra.get("Type") == "/Metadata":
            each.compress = False
            each.stream = [
                part.replace(b"</rdf:RDF>", UA_PART + b"</rdf:RDF>") for part in each.stream
            ]
        if isinstance(each, dict) and each.get("S") == "/TH":
            each["A"]["Scope"] = _scope(pdf, each)


def finish_form(_document: Any, pdf: Any) -> None:
    """Add the direction of header cells to a PDF/UA-1 file with fields."""
    for each in pdf.objects:
        if isinstance(each, dict) and each.get("S") == "/TH":
            each["A"]["Scope"] = _scope(pdf, each)


def _clearly_ended(written: Callable[[Any], bytes]) -> Callable[[Any], bytes]:
    """End every stream by CR LF, and write it once.

    One compressed stream in 256 ends in CR, which a validator takes, with the LF that follows,
    for the end of a line, and finds the stream a byte short (ISO 32000-1, 7.3.8.1). The writer
    asks for a stream twice, for the file and for the digest in its /ID.
    """

    def data(stream: Any) -> bytes:
        if not hasattr(stream, "kept"):
            stream.kept = written(stream).removesuffix(b"\nendstream") + b"\r\nendstream"
        kept: bytes = stream.kept
        return kept

    return data


def _scope(pdf: Any, header: Any) -> str:
    """A header cell in the table's head heads its column, elsewhere its row."""
    row = _object(pdf, header["P"])
    return "/Column" if _object(pdf, row["P"])["S"] == "/THead" else "/Row"


def _object(pdf: Any, reference: bytes | str) -> Any:
    text = reference.decode() if isinstance(reference, bytes) else reference
    return pdf.objects[int(text.split()[0])]
