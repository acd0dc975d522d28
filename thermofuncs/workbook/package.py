"""The workbook file as an archive: opened with suspicion, read part by part, copied with changes.

A workbook from anybody is hostile until proven otherwise. Everything here works on the archive's own
table of contents before a single part is unpacked; nothing is ever unpacked to disk.
"""

from __future__ import annotations

import os
import tempfile
import zipfile
import zlib
from collections.abc import Iterator, Mapping
from contextlib import contextmanager
from dataclasses import dataclass
from pathlib import Path

from thermofuncs.errors import (
    DamagedWorkbook,
    HostileArchive,
    NotAWorkbook,
    OutputRefused,
    WorkbookTooLarge,
)

_COMPOUND_FILE = bytes.fromhex("D0CF11E0A1B11AE1")
_ENCRYPTED = 0x1
_NOT_IN_NAMES = (":", "\\", "\0")
_METHODS = (zipfile.ZIP_STORED, zipfile.ZIP_DEFLATED)


@dataclass(frozen=True, slots=True)
class Limits:
    """How much of a file is read before it is refused.

    Parameters
    ----------
    file_bytes : int. Size of the file. [byte]
    entries : int. Number of parts in the archive.
    part_bytes : int. Unpacked size of one part. [byte]
    total_bytes : int. Unpacked size of all parts. [byte]
    ratio : int. Unpacked over packed size, looked at in parts above ``ratio_from``.
    ratio_from : int. Unpacked size below which the ratio does not matter. [byte]
    cells : int. Number of cells with content.
    seconds : int. Time for one evaluation of the workbook. [s]
    """

    file_bytes: int = 256 * 2**20
    entries: int = 20_000
    part_bytes: int = 512 * 2**20
    total_bytes: int = 1024 * 2**20
    ratio: int = 400
    ratio_from: int = 4 * 2**20
    cells: int = 3_000_000
    seconds: int = 900


DEFAULT_LIMITS = Limits()


@dataclass(frozen=True, slots=True)
class Package:
    """An opened workbook file whose table of contents has been checked.

    Parameters
    ----------
    path : Path. The file, which is only ever read.
    entries : dict. The archive's entries by name, in the archive's order.
    limits : Limits. What was allowed.
    """

    path: Path
    entries: Mapping[str, zipfile.ZipInfo]
    limits: Limits

    def __contains__(self, name: str) -> bool:
        """Whether the file has the part."""
        return name in self.entries

    def read(self, name: str) -> bytes:
        """The unpacked bytes of one part.

        Raises
        ------
        DamagedWorkbook. The part is missing or cannot be unpacked.
        """
        if name not in self.entries:
            raise DamagedWorkbook(path=self.path.name, text=f"the part {name!r} is missing")
        with _archive(self.path) as archive:
            return archive.read(self.entries[name])

    def copy_to(self, target: Path, changed: Mapping[str, bytes]) -> None:
        """Write a copy of the file in which the named parts have other bytes.

        The copy is made beside ``target`` and moved into place in one step, so that ``target`` is
        either the old file or the whole new one.

        Raises
        ------
        OutputRefused. ``target`` is the input itself, or cannot be written.
        """
        check_target(self.path, target)
        temporary: Path | None = None
        try:
            handle, name = tempfile.mkstemp(prefix=".", suffix=".part", dir=target.parent)
            temporary = Path(name)
            with os.fdopen(handle, "wb") as stream, _archive(self.path) as source:
                self._copy(source, stream, changed)
                stream.flush()
                os.fsync(stream.fileno())
            temporary.chmod(self.path.stat().st_mode & 0o777 | 0o200)
            temporary.replace(target)
        except OSError as error:
            reason = error.strerror or str(error)
            raise OutputRefused(path=str(target), text=f"it cannot be written ({reason})") from error
        finally:
            if temporary is not None:
                temporary.unlink(missing_ok=True)

    def _copy(self, source: zipfile.ZipFile, stream: object, changed: Mapping[str, bytes]) -> None:
        with zipfile.ZipFile(stream, "w") as copy:  # type: ignore[call-overload]
            copy.comment = source.comment
            for name, entry in self.entries.items():
                content = changed[name] if name in changed else source.read(entry)
                record = zipfile.ZipInfo(name, entry.date_time)
                record.compress_type = entry.compress_type
                record.external_attr = entry.external_attr
                record.internal_attr = entry.internal_attr
                record.create_system = entry.create_system
                record.comment = entry.comment
                copy.writestr(record, content)


@contextmanager
def _archive(path: Path) -> Iterator[zipfile.ZipFile]:
    try:
        with zipfile.ZipFile(path) as archive:
            yield archive
    except (zipfile.BadZipFile, zlib.error, EOFError, ValueError, NotImplementedError) as error:
        raise DamagedWorkbook(path=path.name, text=f"its archive cannot be read ({error})") from error


def open_package(path: Path, limits: Limits = DEFAULT_LIMITS) -> Package:
    """Open a workbook file and check its table of contents.

    Parameters
    ----------
    path : Path. An .xlsx or .xlsm file.
    limits : Limits. What is allowed.

    Returns
    -------
    Package

    Raises
    ------
    NotAWorkbook. No such file, or another kind of file.
    WorkbookTooLarge. A limit is passed.
    HostileArchive. A name leaves the archive or is there twice, or an entry is encrypted.
    DamagedWorkbook. The archive cannot be read.
    """
    try:
        size = path.stat().st_size
        if not path.is_file():
            raise NotAWorkbook(path=str(path), text="it is not a file")
        with path.open("rb") as stream:
            start = stream.read(len(_COMPOUND_FILE))
    except OSError as error:
        raise NotAWorkbook(path=str(path), text=error.strerror or str(error)) from error
    if size > limits.file_bytes:
        raise WorkbookTooLarge(path=path.name, text=f"{size} bytes", limit=f"{limits.file_bytes} bytes")
    if start == _COMPOUND_FILE:
        text = "it is protected with a password, or in the old binary format"
        raise NotAWorkbook(path=path.name, text=text)
    if not start.startswith(b"PK"):
        raise NotAWorkbook(path=path.name, text="it is not an archive")
    with _archive(path) as archive:
        listed = archive.infolist()
    _check_sizes(path, listed, limits)
    return Package(path, _checked_names(path, listed), limits)


def _check_sizes(path: Path, listed: list[zipfile.ZipInfo], limits: Limits) -> None:
    if len(listed) > limits.entries:
        raise WorkbookTooLarge(path=path.name, text=f"{len(listed)} parts", limit=f"{limits.entries} parts")
    total = 0
    for entry in listed:
        total += entry.file_size
        if entry.file_size > limits.part_bytes or total > limits.total_bytes:
            raise WorkbookTooLarge(
                path=path.name, text=f"a part {entry.filename!r} of {entry.file_size} bytes unpacked",
                limit=f"{limits.part_bytes} bytes a part and {limits.total_bytes} in all",
            )
        if entry.file_size > limits.ratio_from and entry.file_size > limits.ratio * entry.compress_size:
            raise WorkbookTooLarge(
                path=path.name, limit=f"{limits.ratio} times",
                text=f"a part {entry.filename!r} that unpacks to "
                f"{entry.file_size // max(entry.compress_size, 1)} times its size",
            )


def _checked_names(path: Path, listed: list[zipfile.ZipInfo]) -> dict[str, zipfile.ZipInfo]:
    entries: dict[str, zipfile.ZipInfo] = {}
    seen: set[str] = set()
    for entry in listed:
        name = entry.orig_filename
        if name.startswith("/") or ".." in name.split("/") or any(mark in name for mark in _NOT_IN_NAMES):
            raise HostileArchive(path=path.name, text=f"the part name {name!r} leads out of the archive")
        if name.casefold() in seen:
            raise HostileArchive(path=path.name, text=f"the part {name!r} is there twice")
        if entry.flag_bits & _ENCRYPTED:
            raise HostileArchive(path=path.name, text=f"the part {name!r} is encrypted")
        if entry.compress_type not in _METHODS:
            raise HostileArchive(path=path.name, text=f"the part {name!r} is packed in a way no workbook is")
        seen.add(name.casefold())
        entries[name] = entry
    return entries


def check_target(source: Path, target: Path) -> None:
    """Refuse an output that is the input, also under another name of the same file.

    Raises
    ------
    OutputRefused. It is the input, a folder, or its folder does not exist.
    """
    if target.is_dir():
        raise OutputRefused(path=str(target), text="it is a folder")
    if not target.parent.is_dir():
        raise OutputRefused(path=str(target), text="its folder does not exist")
    same = target.resolve() == source.resolve()
    if not same and target.exists():
        same = target.samefile(source)
    if same:
        raise OutputRefused(path=str(target), text="it is the input itself, which is never written to")


def free_name(source: Path) -> Path:
    """A name beside the input that no file has yet: ``NAME-recalculated.xlsx``, then with a number."""
    candidate = source.with_name(f"{source.stem}-recalculated{source.suffix}")
    number = 2
    while candidate.exists() or candidate.is_symlink():
        candidate = source.with_name(f"{source.stem}-recalculated-{number}{source.suffix}")
        number += 1
    return candidate
