"""Writing a folder whole or not at all.

The files go into a new folder beside the wanted one, which takes its name when it is complete.  An older folder that is
to be replaced steps aside first and comes back if anything goes wrong; it is deleted when the new one stands.

Depends on: errors.
"""

from __future__ import annotations

import os
import re
import shutil
import tempfile
from collections.abc import Mapping
from pathlib import Path, PurePosixPath

from rigdesign.errors import OutputError

MARKS = (frozenset({"rig.json", "summary.json"}), frozenset({"study.csv", "study.json"}))
"""Files that tell a folder written here from any other: all of one set are in it."""

TABLES = frozenset({"rig.json", "summary.json", "pads.csv", "levers.csv", "holes.csv", "jacks.csv", "stations.csv",
                    "regions.csv", "across.csv", "study.csv", "study.json", "parts.csv", "strength.csv", "links.csv",
                    "pins.csv", "tare.csv", "cut_list.csv", "drill_list.csv", "masses.csv", "drawings.pdf",
                    })  # fmt: skip
CUTTING_FILES = "dxf"
"""The folder inside the rig folder for files that a machine cuts from, by their ending."""

CUTTING_NAME = re.compile(r"[A-Z]\d+(_side(_pivot|_[ABC])?)?\.dxf")
FIGURES = frozenset({"target", "load_and_pads", "shear_and_moment", "tree", "plan", "across", "study"})
FIGURE_ENDINGS = frozenset({".svg", ".png"})


def require_free(folder: Path, replace: bool) -> None:
    """Raise unless the folder can be written: before a long calculation, so that it is not done for nothing.

    Raises
    ------
    OutputError
        Where something is in the way and may not be replaced, or the folder above is missing or cannot be written.
    """
    try:
        _require_free(folder, replace)
    except OutputError:
        raise
    except (OSError, UnicodeEncodeError) as error:  # a name too long, or one that this machine cannot write
        reason = error.strerror if isinstance(error, OSError) else "this machine cannot write its name"
        raise OutputError(f"{folder}: cannot be written: {reason}") from error


def _require_free(folder: Path, replace: bool) -> None:
    where = str(folder)
    parent = _parent(folder)
    if not parent.exists():
        raise OutputError(f"{where}: the folder above it does not exist: {parent}; make it first")
    if not parent.is_dir():
        raise OutputError(f"{where}: what stands above it is not a folder: {parent}")
    if not os.access(parent, os.W_OK | os.X_OK):
        raise OutputError(
            f"{where}: the folder above it cannot be written: {parent}; choose another or change its rights"
        )
    if folder.is_symlink():
        raise OutputError(f"{where}: this is a link; name the folder itself, or another one")
    if not folder.exists():
        return
    if not folder.is_dir():
        raise OutputError(f"{where}: a file of this name is in the way; move it, or name another folder")
    if not replace:
        raise OutputError(f"{where}: this folder exists and is left alone; use --replace, or name another with --out")
    _require_ours(folder)


def _parent(folder: Path) -> Path:
    return Path(os.path.abspath(folder)).parent


def _require_ours(folder: Path) -> None:
    """Only a folder that was written here is replaced, and only if nothing else was put into it."""
    try:
        names = _named(folder)
        inside = _names_in(folder / CUTTING_FILES)
    except OSError as error:
        raise OutputError(f"{folder}: this folder cannot be read: {error.strerror}") from error
    if not any(marks <= names for marks in MARKS):
        raise OutputError(
            f"{folder}: this is not a folder that rigdesign wrote (it holds no rig.json with its summary.json), so it "
            "is not replaced; name another"
        )
    names = names - {CUTTING_FILES} | inside if inside is not None else names
    strangers = sorted(name.rstrip("/") for name in names if not _is_ours(name))
    if strangers:
        more = f" and {len(strangers) - 1} more" if len(strangers) > 1 else ""
        raise OutputError(
            f"{folder}: this folder holds what rigdesign did not write: {strangers[0]}{more}; replacing would lose it, "
            "so move it elsewhere first, or name another folder"
        )


def _named(folder: Path) -> set[str]:
    """Names of what is in a folder; of a folder inside with a slash at its end, for no file written here is one."""
    return {f"{path.name}/" if path.is_dir() and path.name != CUTTING_FILES else path.name for path in folder.iterdir()}


def _names_in(folder: Path) -> set[str] | None:
    """Names of what is in a folder inside the rig folder, with its own before them; None where it is no folder."""
    if folder.is_symlink() or not folder.is_dir():
        return None
    return {f"{folder.name}/{name}" for name in _named(folder)}


def _is_ours(name: str) -> bool:
    if name.endswith("/"):
        return False
    path = PurePosixPath(name)
    if path.parent.name == CUTTING_FILES:
        return CUTTING_NAME.fullmatch(path.name) is not None
    return name in TABLES or (path.stem in FIGURES and path.suffix in FIGURE_ENDINGS)


def write_folder(files: Mapping[str, bytes], folder: Path, replace: bool = False) -> None:
    """Write the files into a new folder, whole or not at all.

    Parameters
    ----------
    files
        Contents by file name; a name may go into one folder inside, such as "dxf/L1.dxf".
    folder
        The folder to write; the one above it must exist.
    replace
        Whether an older folder that was written here may be replaced.

    Raises
    ------
    OutputError
        Where the folder may not or cannot be written; what was there before is still there, and nothing else.
    """
    require_free(folder, replace)
    folder = Path(os.path.abspath(folder))
    parent = folder.parent
    try:
        fresh = Path(tempfile.mkdtemp(prefix=_beside(folder), suffix=".new", dir=parent))
    except OSError as error:
        raise OutputError(f"{folder}: cannot be written: {error.strerror}") from error
    try:
        _fill(fresh, files)
        _put_in_place(fresh, folder)
    except OSError as error:
        raise OutputError(f"{folder}: cannot be written: {error.strerror or error}; nothing was changed") from error
    finally:
        # gone by now if all went well; an interruption of the user passes through here too
        shutil.rmtree(fresh, ignore_errors=True)


def _beside(folder: Path) -> str:
    """How the name of a temporary folder begins: hidden, and short where the folder's own is long."""
    return f".{folder.name[:40]}."


def _fill(fresh: Path, files: Mapping[str, bytes]) -> None:
    for name, content in files.items():
        (fresh / name).parent.mkdir(exist_ok=True)
        with open(fresh / name, "xb") as file:
            file.write(content)
    # a temporary folder is closed to others; what stands in the end has the rights that any new folder gets
    os.chmod(fresh, 0o777 & ~_umask())


def _umask() -> int:
    """The mask of rights that this process gives to new files; it can only be read by setting it."""
    mask = os.umask(0o077)
    os.umask(mask)
    return mask


def _put_in_place(fresh: Path, folder: Path) -> None:
    """Give the new folder its name; an older one steps aside, and back if that fails."""
    if not folder.exists():
        os.rename(fresh, folder)
        return
    aside = Path(tempfile.mkdtemp(prefix=_beside(folder), suffix=".old", dir=folder.parent))
    old = aside / folder.name
    try:
        os.rename(folder, old)
        os.rename(fresh, folder)
    finally:
        # after a failure, or an interruption, at any point: the old one comes back unless the new one stands
        if old.exists() and not folder.exists():
            os.rename(old, folder)
        shutil.rmtree(aside, ignore_errors=True)
