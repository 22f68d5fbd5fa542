"""Write a results folder: beside its place first, renamed whole at the end."""

import contextlib
import os
import shutil
import tempfile
from collections.abc import Mapping
from importlib.resources import files
from pathlib import Path

from verifier.certificate import digest
from verifier.errors import CaseError

DIGESTS = "digests.txt"
APPENDIX = "appendix.tex"


def check_target(folder: Path) -> None:
    """Refuse a target that is not ours to replace, before anything is computed.

    Raises
    ------
    CaseError
        If `folder` is a file, holds something else than results, or cannot be made.
    """
    if folder.is_symlink() or (folder.exists() and not folder.is_dir()):
        raise CaseError(f"{folder}: is no folder; a folder for results was wanted")
    if folder.is_dir() and any(folder.iterdir()) and not _ours(folder):
        raise CaseError(
            f"{folder}: holds other files than results of this tool; choose another --out"
        )
    above = next(parent for parent in folder.absolute().parents if parent.exists())
    try:
        with tempfile.TemporaryDirectory(prefix=".probe-", dir=above):
            pass
    except OSError as problem:
        raise CaseError(f"{folder}: cannot be written: {_words(problem)}") from problem


def write_results(folder: Path, contents: Mapping[str, bytes]) -> None:
    """Write all `contents` and their digests, and put them in the place of `folder`.

    Parameters
    ----------
    folder
        The results folder; an older one of this tool is replaced whole.
    contents
        Relative path to bytes, without the digests.

    Raises
    ------
    CaseError
        If the disk refuses: nothing is left half-written and an older folder stands as it was.
    """
    complete = {**contents, DIGESTS: digests_text(contents).encode()}
    staged: Path | None = None
    try:
        folder.parent.mkdir(parents=True, exist_ok=True)
        staged = Path(tempfile.mkdtemp(prefix=f".{folder.name}-", dir=folder.parent))
        for name, data in complete.items():
            _write(staged / name, data)
        staged.chmod(0o755)
        _exchange(staged, folder)
    except OSError as problem:
        raise CaseError(f"{folder}: cannot be written: {_words(problem)}") from problem
    finally:
        if staged is not None and staged.exists():
            shutil.rmtree(staged, ignore_errors=True)


def digests_text(contents: Mapping[str, bytes]) -> str:
    """Return the digests in the form that `sha256sum -c` reads, by path."""
    return "".join(f"{digest(contents[name])}  {name}\n" for name in sorted(contents))


def check_digests(folder: Path) -> None:
    """Refuse a results folder in which a file is missing or has changed since it was written.

    The appendix may have been edited: it is about to be written anew.

    Raises
    ------
    CaseError
        Naming the first such file.
    """
    for line in (folder / DIGESTS).read_text(encoding="utf-8").splitlines():
        stated, _, name = line.partition("  ")
        path = folder / name
        if name == APPENDIX:
            continue
        if not path.is_file() or digest(path.read_bytes()) != stated:
            raise CaseError(f"{path}: is not the file whose digest stands in {DIGESTS}")


def replace_file(folder: Path, name: str, data: bytes) -> None:
    """Write one file of a results folder anew, and its line in the digests."""
    (folder / name).write_bytes(data)
    lines = (folder / DIGESTS).read_text(encoding="utf-8").splitlines()
    changed = f"{digest(data)}  {name}"
    kept = [changed if line.endswith(f"  {name}") else line for line in lines]
    (folder / DIGESTS).write_text("".join(f"{line}\n" for line in kept), encoding="utf-8")


def rechecker_files() -> dict[str, bytes]:
    """Return the re-checker's own files as they go into a results folder."""
    source = files("verifier") / "recheck"
    return {
        f"recheck/{entry.name}": entry.read_bytes()
        for entry in sorted(source.iterdir(), key=lambda entry: entry.name)
        if entry.name.endswith(".py")
    }


def _ours(folder: Path) -> bool:
    names = {entry.name for entry in folder.iterdir()}
    return {DIGESTS, "summary.json", "certificates.jsonl"} <= names


def _write(path: Path, data: bytes) -> None:
    path.parent.mkdir(parents=True, exist_ok=True)
    with path.open("wb") as opened:
        opened.write(data)
        opened.flush()
        os.fsync(opened.fileno())


def _exchange(staged: Path, folder: Path) -> None:
    if not folder.exists():
        staged.rename(folder)
        return
    older = Path(tempfile.mkdtemp(prefix=f".{folder.name}-older-", dir=folder.parent))
    folder.rename(older / folder.name)
    try:
        staged.rename(folder)
    except OSError:
        with contextlib.suppress(OSError):
            (older / folder.name).rename(folder)
        raise
    shutil.rmtree(older, ignore_errors=True)


def _words(problem: OSError) -> str:
    return (problem.strerror or str(problem)).lower()
