"""Django's settings, all of them; where the plant's own data lie and how its database is opened.

The environment changes two things: FERRULE_DATA, the folder of the plant's own data, and
FERRULE_SECRET_KEY, the key that signs sessions.
"""

import contextlib
import os
import secrets
from pathlib import Path

from django.utils.functional import SimpleLazyObject

BASE_DIR = Path(__file__).resolve().parent.parent
DATA_DIR = Path(os.environ.get("FERRULE_DATA") or BASE_DIR / ".data").absolute()
# SQLite opens a file but makes no folder. Where none can be made, the audit of a file works all the same.
with contextlib.suppress(OSError):
    DATA_DIR.mkdir(parents=True, exist_ok=True)


def secret_key() -> str:
    """Read the key from the environment or from its file, made for its owner only when first needed."""
    if given := os.environ.get("FERRULE_SECRET_KEY"):
        return given
    file = DATA_DIR / "secret-key"
    if not file.exists():
        made = DATA_DIR / f"secret-key.{os.getpid()}"
        handle = os.open(made, os.O_WRONLY | os.O_CREAT | os.O_TRUNC, 0o600)
        with open(handle, "w", encoding="ascii") as out:
            out.write(secrets.token_urlsafe(50))
        with contextlib.suppress(FileExistsError):
            os.link(made, file)  # unlike a rename, it leaves the key of another start that was first
        made.unlink()
    return file.read_text(encoding="ascii")


SECRET_KEY = SimpleLazyObject(secret_key)  # the audit of a file needs no key, so it makes none
DEBUG = False
ALLOWED_HOSTS = ["localhost", "127.0.0.1", "[::1]"]

INSTALLED_APPS = ["config", "instruments", "loops", "validation"]

DATABASES = {
    "default": {
        "ENGINE": "django.db.backends.sqlite3",
        "NAME": DATA_DIR / "db.sqlite3",
        # With Django's defaults a third of the transactions of fifty simultaneous writers end in 'database is
        # locked'; with these, none. FULL: what was reported as stored outlives a power cut.
        "OPTIONS": {
            "timeout": 20,
            "transaction_mode": "IMMEDIATE",
            "init_command": "PRAGMA journal_mode=WAL; PRAGMA synchronous=FULL; PRAGMA foreign_keys=ON;"
            " PRAGMA cache_size=-20000; PRAGMA temp_store=MEMORY;",
        },
    },
}
DEFAULT_AUTO_FIELD = "django.db.models.BigAutoField"

LANGUAGE_CODE = "en-gb"
TIME_ZONE = "UTC"
USE_TZ = True
