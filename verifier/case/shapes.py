"""Turn pydantic's findings about shapes into messages with paths."""

from collections.abc import Iterator
from typing import Any

from pydantic import BaseModel, ValidationError
from pydantic_core import ErrorDetails

from verifier.registry import nearest

WANTED = {
    "string_type": "a text was wanted",
    "int_type": "an integer was wanted",
    "bool_type": "true or false was wanted",
    "list_type": "a list was wanted",
    "dict_type": "a table was wanted",
    "model_type": "a table was wanted",
    "too_short": "more entries were wanted",
    "too_long": "fewer entries were wanted",
    "string_too_short": "a non-empty text was wanted",
    "string_too_long": "a shorter text was wanted",
    "string_pattern_mismatch": "a name of letters, digits, - and _ was wanted",
}
OWN_KEYS = 60  # longest piece of the input that a message repeats


def shape_problems(
    failed: ValidationError, model: type[BaseModel]
) -> Iterator[tuple[list[str | int], str]]:
    """Yield path and message for everything that `failed` holds.

    Parameters
    ----------
    failed
        From a validation against `model`.
    model
        Whose keys are the nearest known ones.
    """
    for detail in failed.errors(include_url=False):
        path = [step for step in detail["loc"] if step != "[key]"]
        yield path, _message(detail, path, model)


def _message(detail: ErrorDetails, path: list[str | int], model: type[BaseModel]) -> str:
    label = _label(path)
    match detail["type"]:
        case "extra_forbidden":
            near = nearest(str(path[-1]), _keys(model, path[:-1]))
            return f"{label}: this key is unknown; {near}"
        case "missing":
            return f"{label}: this key is missing"
        case "literal_error":
            return f"{label}: {_shown(detail)} stands there; {detail['ctx']['expected']} was wanted"
    wanted = WANTED.get(detail["type"]) or detail["msg"][:1].lower() + detail["msg"][1:]
    return f"{label}: {_shown(detail)} stands there; {wanted}"


def _shown(detail: ErrorDetails) -> str:
    text = repr(detail["input"])
    return text if len(text) <= OWN_KEYS else f"{text[:OWN_KEYS]}..."


def _label(path: list[str | int]) -> str:
    """Return `claim 2: says` for ["claim", 1, "says"]."""
    label = ""
    for step in path:
        label += f" {step + 1}" if isinstance(step, int) else f": {step}" if label else step
    return label or "case"


def _keys(model: type[BaseModel], path: list[str | int]) -> list[str]:
    """Return the keys that may stand at `path`."""
    found: Any = model
    for step in path:
        if isinstance(step, str) and isinstance(found, type) and issubclass(found, BaseModel):
            fields = {f.alias or name: f for name, f in found.model_fields.items()}
            found = _inner(fields[step].annotation) if step in fields else found
    return [f.alias or name for name, f in found.model_fields.items()]


def _inner(annotation: Any) -> Any:  # noqa: ANN401 a type expression
    """Return the model inside a list, a dictionary or an optional."""
    for argument in getattr(annotation, "__args__", ()):
        if isinstance(argument, type) and issubclass(argument, BaseModel):
            return argument
        inner = _inner(argument)
        if isinstance(inner, type) and issubclass(inner, BaseModel):
            return inner
    return annotation
