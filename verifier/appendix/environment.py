"""The template environment: LaTeX delimiters, nothing undefined, nothing printed by accident."""

from functools import cache
from importlib.resources import files
from importlib.resources.abc import Traversable
from pathlib import Path

from jinja2 import Environment, FunctionLoader, StrictUndefined, TemplateNotFound, Undefined

from verifier.typography.escape import Latex, tex


def template_root() -> Traversable:
    """Return the templates of an installed package, or else those of a checkout."""
    shipped = files("verifier").joinpath("_templates")
    if (
        shipped.is_dir()
    ):  # first: a folder called templates beside site-packages may be a stranger's
        return shipped
    return Path(__file__).resolve().parents[2] / "templates"


def read_template(name: str) -> str:
    """Return the text of a file below the templates.

    Raises
    ------
    TemplateNotFound
        If there is none, or the name leads outside.
    """
    pieces = name.split("/")
    if not all(pieces) or {".", ".."} & set(pieces):
        raise TemplateNotFound(name)
    found = template_root().joinpath(*pieces)
    if not found.is_file():
        raise TemplateNotFound(name)
    return found.read_text(encoding="utf-8")


def has_template(name: str) -> bool:
    """Return whether there is a template of that name."""
    return template_root().joinpath(*name.split("/")).is_file()


def exact_only(value: object) -> object:
    r"""Return what a template prints for `value`: integers, escaped text, and `Latex` as it is.

    Raises
    ------
    TypeError
        If it is anything else; a float above all.

    Examples
    --------
    >>> print(exact_only("a_b"), exact_only(Latex("a_b")))
    a\_b a_b
    """
    if isinstance(value, Undefined):
        return value  # jinja2 raises with the name
    if isinstance(value, Latex):
        return value.code
    if isinstance(value, str):
        return tex(value)
    if isinstance(value, int) and not isinstance(value, bool):
        return value
    raise TypeError(f"template printed {value!r}; an appendix prints integers, text and LaTeX only")


@cache
def environment() -> Environment:
    """Return the environment, made once; templates lie in the folder `templates`."""
    return Environment(
        loader=FunctionLoader(read_template),
        undefined=StrictUndefined,
        finalize=exact_only,
        block_start_string=r"\BLOCK{",
        block_end_string="}",
        variable_start_string=r"\VAR{",
        variable_end_string="}",
        comment_start_string=r"\#{",
        comment_end_string="}",
        trim_blocks=True,
        lstrip_blocks=True,
        keep_trailing_newline=True,
        autoescape=False,
    )


def render(name: str, /, **values: object) -> Latex:
    """Return the template `name` filled in."""
    return Latex(environment().get_template(name).render(**values))
