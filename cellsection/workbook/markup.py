"""The XML in saved workbooks, read in pieces as it is unpacked: elements, attributes and text, and nothing else.

A workbook needs no document type; one is refused, and with it every entity, so that nothing is ever expanded or
fetched. Depth and length are capped. The parser is expat, of the standard library: no tree of a large part is built,
a sheet of any size costs its values only, and there is nothing to load at the start. Element names arrive as
"namespace name", attributes without a namespace by their bare name.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator
from xml.parsers import expat

from cellsection.errors import WorkbookError

__all__ = ["DEEPEST", "LONGEST_TEXT", "Element", "TreeBuilder", "feed", "new_parser", "refused", "tree"]

DEEPEST = 256  # elements within one another
LONGEST_TAG = 4_000_000  # bytes of one tag with its attributes
LONGEST_TEXT = 1_000_000  # characters in one element; a cell holds 32,767
MOST_ELEMENTS = 1_000_000  # in a part of which a tree is built
ENCODINGS = frozenset(("utf-8", "utf-16", "us-ascii", "iso-8859-1"))


class Element:
    """An element of a small part. Its name is without namespace; `text` is what stands directly in it."""

    __slots__ = ("attributes", "children", "name", "text")

    def __init__(self, name: str, attributes: dict[str, str]) -> None:
        self.name = name.rpartition(" ")[2]
        self.attributes = attributes
        self.children: list[Element] = []
        self.text = ""

    def get(self, name: str, default: str = "") -> str:
        """An attribute by its name; one in a namespace is named "namespace name"."""
        return self.attributes.get(name, default)

    def flag(self, name: str) -> bool:
        """Whether an attribute says yes."""
        return self.attributes.get(name, "") in ("1", "true")

    def along(self, *path: str) -> Iterator[Element]:
        """The elements at the end of a path of names below this one."""
        for child in self.children:
            if child.name == path[0]:
                if len(path) == 1:
                    yield child
                else:
                    yield from child.along(*path[1:])


class TreeBuilder:
    """Takes the events of one element with all that is in it and makes a tree of them."""

    def __init__(self, name: str, attributes: dict[str, str]) -> None:
        self.root = Element(name, attributes)
        self.open = [self.root]
        self.count = 1

    def start(self, name: str, attributes: dict[str, str]) -> None:
        """An element begins."""
        element = Element(name, attributes)
        self.open[-1].children.append(element)
        self.open.append(element)
        self.count += 1
        if len(self.open) > DEEPEST:
            raise refused(f"nests deeper than {DEEPEST} elements")
        if self.count > MOST_ELEMENTS:
            raise refused(f"holds more than {MOST_ELEMENTS:,} elements")

    def end(self) -> bool:
        """The innermost element ends; whether that was the last."""
        self.open.pop()
        return not self.open

    def data(self, text: str) -> None:
        """Text in the innermost element."""
        element = self.open[-1]
        element.text += text
        if len(element.text) > LONGEST_TEXT:
            raise refused(f"holds a text of more than {LONGEST_TEXT:,} characters")


def refused(why: str) -> WorkbookError:
    """A refusal of the part being read; `feed` says which one that is."""
    return WorkbookError(why, remedy="")


def new_parser(
    start: Callable[[str, dict[str, str]], object],
    end: Callable[[str], object],
    data: Callable[[str], object] | None = None,
) -> expat.XMLParserType:
    """A parser that calls the three functions as elements and texts come, and refuses what no workbook needs."""
    parser = expat.ParserCreate(None, " ")
    parser.buffer_text = True
    parser.buffer_size = 65_536
    parser.StartElementHandler, parser.EndElementHandler, parser.CharacterDataHandler = start, end, data

    def doctype(*_: object) -> None:
        raise refused("declares a document type, which no workbook needs")

    def declaration(_: str, encoding: str | None, __: int) -> None:
        if encoding is not None and encoding.lower() not in ENCODINGS:
            raise refused(f'is encoded in "{encoding}", which no workbook is')

    parser.StartDoctypeDeclHandler, parser.XmlDeclHandler = doctype, declaration
    return parser


def feed(parser: expat.XMLParserType, pieces: Iterable[bytes], where: str) -> None:
    """Send the bytes of a part through a parser.

    where : the file and the part, to open a message
    Raises WorkbookError for XML that is not well-formed or asks for too much.
    """
    fed = 0
    try:
        for piece in pieces:
            fed += len(piece)
            parser.Parse(piece, False)
            if fed - parser.CurrentByteIndex > LONGEST_TAG + len(piece):
                raise refused(f"holds a tag of more than {LONGEST_TAG:,} bytes")
        parser.Parse(b"", True)
    except expat.ExpatError as problem:
        raise WorkbookError(f"{where} is not well-formed XML ({problem})", remedy="Save the workbook again") from None
    except WorkbookError as problem:
        if problem.remedy:
            raise
        raise WorkbookError(f"{where} {problem.fault}", remedy="Save the workbook again") from None


def tree(pieces: Iterable[bytes], where: str) -> Element:
    """A small part as a tree; see `feed` for what is refused."""
    builder: TreeBuilder | None = None

    def start(name: str, attributes: dict[str, str]) -> None:
        nonlocal builder
        if builder is None:
            builder = TreeBuilder(name, attributes)
        else:
            builder.start(name, attributes)

    def end(_: str) -> None:
        if builder is not None:
            builder.end()

    def data(text: str) -> None:
        if builder is not None and builder.open:
            builder.data(text)

    feed(new_parser(start, end, data), pieces, where)
    assert builder is not None  # well-formed XML has a root
    return builder.root
