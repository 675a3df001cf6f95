"""The engineer's own Markdown as blocks: CommonMark with tables and maths, no HTML."""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator, Sequence

from markdown_it import MarkdownIt
from markdown_it.rules_block import StateBlock
from markdown_it.rules_inline import StateInline
from markdown_it.tree import SyntaxTreeNode

from calcpack.sheets.blocks import (
    Block,
    Column,
    Framed,
    Inline,
    Items,
    Paragraph,
    Preformatted,
    Styled,
    Table,
    Tex,
    Text,
)

DEEPEST = 18
"""How deep lists and quotations may be nested; the parser drops what lies deeper than 20."""
WIDEST = 40
"""A column of a table is taken as no wider than so many characters."""

# As in other Markdown with maths, "$5 and $6" is no formula: a formula has no space inside its
# dollar signs and no digit after them.
_MATH = re.compile(
    r"\$\$ (?P<display> (?: [^$\\] | \\. )+ ) \$\$"
    r"| (?<!\$) \$ (?!\s) (?P<inline> (?: [^$\\] | \\. )+ ) (?<!\s) \$ (?!\d)",
    re.DOTALL | re.VERBOSE,
)


def markdown_blocks(source: str) -> tuple[Block, ...]:
    """The blocks of a Markdown text.

    A heading becomes a bold paragraph, for it must not enter the package's own order of headings.
    A link shows its text and its target, a picture its words only: no file is fetched. HTML is
    shown as typed, and so is the whole text if it is nested too deep.
    """
    tokens = _parser().parse(source)
    if any(token.level >= DEEPEST for token in tokens):
        return (Preformatted(source),)
    return _blocks(SyntaxTreeNode(tokens).children)


def _parser() -> MarkdownIt:
    parser = MarkdownIt("commonmark", {"html": False}).enable("table")
    parser.inline.ruler.before("escape", "math", _math_in_line)
    parser.block.ruler.before(
        "fence", "math", _math_block, {"alt": ["paragraph", "reference", "blockquote", "list"]}
    )
    return parser


def _math_in_line(state: StateInline, silent: bool) -> bool:
    found = _MATH.match(state.src, state.pos)
    if found is None:
        return False
    if not silent:
        _push_math(state, found["display"] or found["inline"], found["display"] is not None)
    state.pos = found.end()
    return True


def _math_block(state: StateBlock, start: int, end: int, silent: bool) -> bool:
    """Lines from one that begins with ``$$`` to one that ends so: no list or heading in them."""
    if not state.src.startswith("$$", state.bMarks[start] + state.tShift[start]):
        return False
    for line in range(start, end):
        if state.isEmpty(line) or state.sCount[line] < state.blkIndent:
            return False
        found = _MATH.fullmatch(state.getLines(start, line + 1, state.blkIndent, False).strip())
        if found and found["display"]:
            if not silent:
                _push_math(state, found["display"], True)
                state.line = line + 1
            return True
    return False


def _push_math(state: StateInline | StateBlock, source: str, display: bool) -> None:
    token = state.push("math", "", 0)
    token.content, token.meta = source.strip(), {"display": display}


def _blocks(nodes: Sequence[SyntaxTreeNode]) -> tuple[Block, ...]:
    return tuple(_block(node) for node in nodes)


def _block(node: SyntaxTreeNode) -> Block:
    match node.type:
        case "paragraph":
            return Paragraph(_text(node))
        case "heading":
            return Paragraph((Styled(_text(node), "strong"),), leads=True)
        case "bullet_list" | "ordered_list":
            start = int(node.attrGet("start") or 1) if node.type == "ordered_list" else None
            return Items(tuple(_blocks(item.children) for item in node.children), start)
        case "blockquote":
            return Framed("Quotation", _blocks(node.children))
        case "code_block" | "fence":
            return Preformatted(node.content.removesuffix("\n"))
        case "table":
            return _table(node)
        case "math":
            return Paragraph((Tex(node.content, display=True),))
    return Paragraph((node.markup[:3],))  # a rule across the page, as it was typed


def _table(node: SyntaxTreeNode) -> Table:
    rows = [row.children for part in node.children for row in part.children]
    columns = []
    for cells in zip(*rows, strict=True):
        title = cells[0]
        right = "right" in str(title.attrGet("style"))
        width = min(WIDEST, max(1, *(len(_words(cell)) for cell in cells)))
        columns.append(Column(_words(title), "right" if right else "left", width))
    return Table(tuple(columns), tuple(tuple(map(_text, row)) for row in rows[1:]))


def _text(node: SyntaxTreeNode) -> Text:
    """What stands in a node that holds inline content."""
    return tuple(_inline(part for inline in node.children for part in inline.children))


def _inline(nodes: Iterable[SyntaxTreeNode]) -> Iterator[Inline]:
    for node in nodes:
        match node.type:
            case "softbreak":
                yield " "
            case "hardbreak":
                yield "\n"
            case "code_inline":
                yield Styled((node.content,), "code")
            case "math":
                yield Tex(node.content, node.meta["display"])
            case "strong":
                yield Styled(tuple(_inline(node.children)), "strong")
            case "em":
                yield Styled(tuple(_inline(node.children)), "emphasis")
            case "link":
                yield from _inline(node.children)
                target = str(node.attrGet("href"))
                if target != _words(node):
                    yield f" ({target})"
            case "image":
                yield f"[picture not shown: {_words(node)}]"
            case _ if node.content:
                yield node.content


def _words(node: SyntaxTreeNode) -> str:
    """The text of a node and of all that stands in it."""
    if node.children:
        return "".join(map(_words, node.children))
    return f"${node.content}$" if node.type == "math" else node.content
