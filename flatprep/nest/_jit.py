"""The one door to numba.

Kernels take C-contiguous float64 and int64 arrays (grouped in named tuples), raise nothing, hold no lock and use
neither fast math nor threads. FLATPREP_NO_JIT=1 runs them as plain Python. Compiled code is kept in the package's
own folder, or the user's cache folder; where neither can be written, in a folder that lasts as long as the process.
"""

import atexit
import hashlib
import os
import shutil
import tempfile
from collections.abc import Callable
from pathlib import Path
from typing import Any, TypeVar, cast

F = TypeVar("F", bound=Callable[..., Any])

_HERE = Path(__file__).parent
JIT = os.environ.get("FLATPREP_NO_JIT") != "1"


def sources_digest(package: Path = _HERE) -> str:
    """Tell the sources of all kernels apart from those of any other version."""
    sources = [p.read_bytes() for p in sorted(package.glob("*.py"))]
    return hashlib.sha256(b"".join(s for s in sources if b"_jit import" in s)).hexdigest()


def drop_stale(package: Path) -> None:
    """Delete compiled code when the source of any kernel has changed.

    numba looks at the one file a kernel stands in, though it compiles the kernels of other files into it.
    """
    digest = sources_digest(package)
    cache = package / "__pycache__"
    note = cache / "kernels.sha256"
    try:
        if note.exists() and note.read_text() == digest:
            return
        cache.mkdir(exist_ok=True)
        for compiled in [*cache.glob("*.nbi"), *cache.glob("*.nbc")]:
            compiled.unlink(missing_ok=True)
        note.write_text(digest)
    except OSError:  # not ours to write to: an installed package does not change either
        return


def kernel(func: F) -> F:
    """Compile on first call and keep the result on disk, or leave the function plain."""
    return _compiled(func, {})


def bare(func: F) -> F:
    """Like `kernel`, for what allocates no array: no references are counted, which tells in the innermost loops."""
    return _compiled(func, {"_nrt": False})


def inner(func: F) -> F:
    """Like `bare`, and copied into its callers."""
    return _compiled(func, {"_nrt": False, "inline": "always"})


def _compiled(func: F, options: dict[str, Any]) -> F:
    if not JIT:
        func.py_func = func  # type: ignore[attr-defined]
        return func
    import numba

    try:
        return cast(F, numba.njit(cache=True, nogil=True, **options)(func))
    except RuntimeError:  # numba found no folder to write to
        _temporary_cache()
        return cast(F, numba.njit(cache=True, nogil=True, **options)(func))


def _temporary_cache() -> None:
    """Give this process and its children a cache folder that goes away with it."""
    import numba

    folder = tempfile.mkdtemp(prefix="flatprep-numba-")
    atexit.register(shutil.rmtree, folder, ignore_errors=True)
    os.environ["NUMBA_CACHE_DIR"] = folder
    numba.config.CACHE_DIR = folder  # type: ignore[attr-defined]


if JIT:
    drop_stale(_HERE)
