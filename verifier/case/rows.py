"""The cells of a CSV that a table is compared with."""

import csv
import io


def read_rows(data: bytes) -> list[list[str]]:
    """Return the cells below the header, as they stand; empty lines are passed over.

    Raises
    ------
    UnicodeDecodeError, csv.Error
        If the bytes are no such file; `rows_problem` says so beforehand.
    """
    rows = [row for row in csv.reader(io.StringIO(data.decode("utf-8"), newline="")) if row]
    return rows[1:]


def rows_problem(data: bytes) -> str | None:
    """Return why the bytes are no CSV, or None if they are."""
    try:
        read_rows(data)
    except UnicodeDecodeError as problem:
        return f"is no UTF-8 text at byte {problem.start + 1}"
    except csv.Error as problem:
        return f"is no CSV: {problem}"
    return None
