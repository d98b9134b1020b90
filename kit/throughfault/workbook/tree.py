"""The files of a record folder: listed without following a link, hashed, and shown so that a name does no harm."""

from __future__ import annotations

import hashlib
import os
import stat
import unicodedata
from dataclasses import dataclass, field
from pathlib import Path

__all__ = [
    "Faults",
    "Tree",
    "collision_key",
    "path_fault",
    "remove_if_empty",
    "scan",
    "sha256_bytes",
    "shown",
    "write_durably",
]


@dataclass
class Faults:
    """What is wrong with a record, each sentence under the path it is about."""

    found: list[tuple[str, str]] = field(default_factory=list)

    def add(self, path: str, sentence: str) -> None:
        """Note a fault of the file at `path`."""
        self.found.append((path, sentence))

    def names(self, path: str) -> bool:
        """Say whether a fault of this file is noted already."""
        return any(path == other for other, _ in self.found)

    @property
    def lines(self) -> tuple[str, ...]:
        """One sentence for each fault, safe to print."""
        return tuple(f"{shown(path)}: {shown(sentence)}" for path, sentence in self.found)


@dataclass
class Tree:
    """The regular files of a folder by their path relative to it, with the SHA-256 of each."""

    folder: Path
    hashes: dict[str, str] = field(default_factory=dict)
    sizes: dict[str, int] = field(default_factory=dict)

    def path(self, name: str) -> Path:
        """Return where a file of the folder stands."""
        return self.folder / name


def scan(folder: Path, faults: Faults) -> Tree:
    """List and hash every regular file below `folder`; whatever else stands there is a fault.

    Links are not followed and devices, pipes and sockets are not opened.
    """
    tree = Tree(folder)
    pending = [folder]
    while pending:
        directory = pending.pop()
        inside = sorted(directory.iterdir())
        name = directory.relative_to(folder).as_posix()
        if not inside and name not in {".", "signatures"}:
            faults.add(f"{name}/", "is an empty folder that does not belong to the record")
        for path in inside:
            if stat.S_ISDIR(path.lstat().st_mode):
                pending.append(path)
            else:
                _add_file(tree, path, faults)
    return tree


def path_fault(name: str) -> str | None:
    """Return what makes a path unfit for a record on any system, or None.

    A path is relative, with ``/`` between its parts, and holds nothing that a shell, ``sha256sum`` or another
    file system reads differently.
    """
    if any(character in '\\:"' or not character.isprintable() for character in name):
        return "holds a backslash, a colon, a quotation mark or a character that cannot be printed"
    parts = name.split("/")
    if any(part in {"", ".", ".."} for part in parts):
        return "is not a plain relative path"
    if any(part != part.strip() or part.endswith(".") for part in parts):
        return "has a part that begins or ends with a space, or ends with a dot"
    return None


def collision_key(name: str) -> str:
    """Return a key that is equal for two names which some file systems take for one."""
    return unicodedata.normalize("NFC", unicodedata.normalize("NFC", name).casefold())


def sha256_bytes(data: bytes) -> str:
    """Return the SHA-256 of the bytes in hexadecimal."""
    return hashlib.sha256(data).hexdigest()


def shown(text: str) -> str:
    """Return the text with every character that a terminal would act on written as an escape."""
    return "".join(c if c.isprintable() else ascii(c)[1:-1] for c in text)


def write_durably(path: Path, data: bytes) -> None:
    """Write a file and wait until the disk has it."""
    with path.open("wb") as stream:
        stream.write(data)
        stream.flush()
        os.fsync(stream.fileno())


def remove_if_empty(directory: Path) -> None:
    """Remove a directory when nothing is in it; leave it otherwise."""
    if directory.is_dir() and not any(directory.iterdir()):
        directory.rmdir()


def _add_file(tree: Tree, path: Path, faults: Faults) -> None:
    name = path.relative_to(tree.folder).as_posix()
    status = path.lstat()
    if not stat.S_ISREG(status.st_mode):
        faults.add(name, "is a link or a special file; a record holds regular files only")
        return
    with path.open("rb") as stream:
        tree.hashes[name] = hashlib.file_digest(stream, "sha256").hexdigest()
    tree.sizes[name] = status.st_size
