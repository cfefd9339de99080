"""Where things lie: the folders that come with the program and the folders of the person who uses it."""

import os
from pathlib import Path

_PACKAGE = Path(__file__).resolve().parent
_NAME = "trimwright"


def resources() -> Path:
    """Return the folder of icons, themes and templates, in a checkout as well as installed."""
    return _shipped("resources")


def sample_plants() -> Path:
    """Return the folder of the tuning sheets and records that come with the program."""
    return _shipped("sample_plants")


def demonstrations() -> Path:
    """Return the folder of the demonstrations that come with the program, each on one of its tuning sheets."""
    return sample_plants() / "demonstrations"


def cache() -> Path:
    """Return the user's folder for what can be made again; nothing is created."""
    from platformdirs import user_cache_path

    return user_cache_path(_NAME, appauthor=False)


def settings() -> Path:
    """Return the user's folder for what should last, such as the window's layout; nothing is created."""
    from platformdirs import user_config_path

    return user_config_path(_NAME, appauthor=False)


def keep_compiled_kernels() -> None:
    """Give numba a folder for compiled code that can be written to, unless ``NUMBA_CACHE_DIR`` names one already.

    Without it numba refuses to import a cached function where the package is read-only and there is no home folder.
    Must run before numba is imported for the first time.
    """
    if not os.environ.get("NUMBA_CACHE_DIR"):
        os.environ["NUMBA_CACHE_DIR"] = str(_writable(cache() / "kernels"))


def _shipped(name: str) -> Path:
    """Return ``tuner/<name>`` as the wheel lays it, else ``<name>`` beside the package as the checkout has it."""
    installed = _PACKAGE / name
    return installed if installed.is_dir() else _PACKAGE.parent / name


def _writable(wish: Path) -> Path:
    """Return the wished folder, made if need be, or a new temporary one where it cannot be written to."""
    try:
        wish.mkdir(parents=True, exist_ok=True)
    except OSError:
        return _temporary()
    return wish if os.access(wish, os.W_OK) else _temporary()


def _temporary() -> Path:
    import tempfile

    return Path(tempfile.mkdtemp(prefix=f"{_NAME}-"))
