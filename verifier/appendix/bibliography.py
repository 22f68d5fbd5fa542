"""The bibliography: published sources of the tool, sources of the case, and what is cited."""

import re
from collections.abc import Iterable, Mapping, Sequence
from functools import cache

from verifier.appendix.environment import read_template
from verifier.case.case import Case
from verifier.errors import CaseError
from verifier.typography.bibtex import Entry, check_bibtex, read_bibtex
from verifier.typography.escape import Latex, accented, tex

COMMON = "common-practice"  # the source of what no paper introduced
HARD_AND = "\u00a0and\u00a0"  # inside one name, where it separates no authors


@cache
def published() -> Mapping[str, Entry]:
    """Return the tool's own published sources by key."""
    return {entry.key: entry for entry in read_bibtex(read_template("sources.bib"))}


def entries(case: Case) -> Mapping[str, Entry]:
    """Return every source that the appendix of `case` may cite, by key.

    A source of the case without BibTeX becomes an entry whose one field is its text.

    Raises
    ------
    CaseError
        If the BibTeX of a source cannot be read; a case reader says so earlier.
    """
    own: dict[str, Entry] = {}
    for key, source in case.sources.items():
        fields: Mapping[str, str] = {"note": source.text}
        kind = "misc"
        if source.bibtex:
            problem = check_bibtex(source.bibtex)
            if problem is not None:
                raise CaseError(f"[source.{key}] bibtex: {problem}")
            read = read_bibtex(source.bibtex)[0]
            kind, fields = read.kind, read.fields
        own[key] = Entry(kind, key, fields)
    return {**published(), **own}


class Citations:
    """What has been cited so far, in the order of first citation.

    Parameters
    ----------
    known
        All sources by key.
    """

    def __init__(self, known: Mapping[str, Entry]) -> None:
        self.known = known
        self.keys: list[str] = []

    def cite(self, key: str, place: str = "") -> Latex:
        r"""Return a citation of `key`, with a place inside it such as `Theorem 2`.

        Raises
        ------
        KeyError
            If there is no such source.
        """
        if key not in self.known:
            raise KeyError(f"the source {key} is in no bibliography")
        if key not in self.keys:
            self.keys.append(key)
        note = f"[{{{tex(place)}}}]" if place else ""
        return Latex(f"\\cite{note}{{{key}}}")

    def cited(self) -> Sequence[Entry]:
        """Return the sources that were cited, by author and year."""
        return sorted((self.known[key] for key in self.keys), key=_by_author)

    def source(self, text: str) -> Latex:
        r"""Return a `source` of the registries: a key and a place, or words; none if common.

        Examples
        --------
        >>> print(Citations(published()).source("Weil1948, chapter 2").code)
        \cite[{chapter 2}]{Weil1948}
        """
        if text == COMMON:
            return Latex("")
        pieces = [self._piece(piece.strip()) for piece in text.split(";")]
        return Latex("; ".join(pieces))

    def _piece(self, piece: str) -> str:
        key, _, place = piece.partition(",")
        if key.strip() in self.known:
            return self.cite(key.strip(), place.strip()).code
        return tex(piece)


def _by_author(entry: Entry) -> tuple[str, str, str]:
    fields = entry.fields
    return (fields.get("author", fields.get("note", "")), fields.get("year", ""), entry.key)


def item(entry: Entry) -> Latex:
    """Return the text of a bibliography item: authors, title, where it appeared."""
    fields = entry.fields
    pieces = [_names(fields["author"])] if "author" in fields else []
    if "title" in fields:
        title = tex(fields["title"])
        pieces.append(title if entry.kind == "article" else f"\\emph{{{title}}}")
    pieces += _container(fields)
    pieces += [tex(fields[name]) for name in ("type",) if name in fields and "number" not in fields]
    if "type" in fields and "number" in fields:
        pieces.append(tex(f"{fields['type']} {fields['number']}"))
    names = ("institution", "publisher", "address", "school", "howpublished", "year")
    pieces += [tex(fields[name]) for name in names if name in fields and "journal" not in fields]
    if "pages" in fields and "journal" not in fields:
        pieces.append(tex(f"pp. {fields['pages']}"))
    pieces += [tex(fields[name]) for name in ("note",) if name in fields]
    pieces += [f"\\url{{{fields[name]}}}" for name in ("url",) if _is_url(fields.get(name, ""))]
    return Latex(", ".join(filter(None, pieces)).rstrip(".") + ".")


def _container(fields: Mapping[str, str]) -> list[str]:
    if "journal" in fields:
        where = f"\\emph{{{tex(fields['journal'])}}}"
        where += f" {tex(fields['volume'])}" if "volume" in fields else ""
        where += f" ({tex(fields['year'])})" if "year" in fields else ""
        return [where, *([tex(fields["pages"])] if "pages" in fields else [])]
    made = [f"in: \\emph{{{tex(fields['booktitle'])}}}"] if "booktitle" in fields else []
    if "series" in fields:
        made.append(tex(f"{fields['series']} {fields.get('volume', '')}"))
    return made


def _names(authors: str) -> str:
    shown: list[str] = []
    for author in authors.split(" and "):
        last, comma, first = author.partition(",")
        shown.append(tex(f"{first.strip()} {last.strip()}" if comma else author))
    if len(shown) < 3:
        return " and ".join(shown)
    return f"{', '.join(shown[:-1])} and {shown[-1]}"


def _is_url(text: str) -> bool:
    return re.fullmatch(r"https?://[A-Za-z0-9./_~:?=+-]+", text) is not None


def bib_text(cited: Iterable[Entry]) -> str:
    """Return entries as BibTeX in ASCII, fields in the order in which they were read."""
    return "\n".join(_bib_entry(entry) for entry in cited)


def _bib_entry(entry: Entry) -> str:
    lines = [f"@{entry.kind}{{{entry.key},"]
    lines += [f"  {name} = {{{_bib_value(name, text)}}}," for name, text in entry.fields.items()]
    return "\n".join([*lines, "}", ""])


def _bib_value(name: str, text: str) -> str:
    r"""Return escaped text with each accent in braces, so that BibTeX sees one letter."""
    made = "".join(
        f"{{{tex(character)}}}" if accented(character) else tex(character) or " "
        for character in text
    ).replace(r"\textendash{}", "--")
    whole = name == "title" or HARD_AND in text
    return f"{{{made}}}" if whole else made
