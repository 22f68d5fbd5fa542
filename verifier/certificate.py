"""The canonical text of a JSON document, and its digest."""

import hashlib
import json

from verifier.records import Json


def canonical_text(document: Json) -> str:
    """Return the text of RFC 8785 for a document without floats.

    Parameters
    ----------
    document
        Objects with ASCII keys, arrays, texts, integers below 2^53, booleans and null.

    Examples
    --------
    >>> canonical_text({"b": [1, "1/2"], "a": None})
    '{"a":null,"b":[1,"1/2"]}'
    """
    return json.dumps(
        document, sort_keys=True, separators=(",", ":"), ensure_ascii=False, allow_nan=False
    )


def digest(data: bytes) -> str:
    """Return the SHA-256 of `data` in hexadecimal."""
    return hashlib.sha256(data).hexdigest()
