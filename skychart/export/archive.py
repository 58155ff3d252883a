"""Several files as one ZIP archive, the same bytes from the same files.

Source: PKWARE, APPNOTE.TXT, ZIP File Format Specification, 6.3.10; dates cannot lie before 1980.
"""

import io
import zipfile
from collections.abc import Mapping

_EARLIEST = (1980, 1, 1, 0, 0, 0)
_UNIX, _PLAIN_FILE = 3, 0o100644 << 16


def zip_bytes(files: Mapping[str, bytes]) -> bytes:
    """An archive of `files` by name, sorted, without clock or owner."""
    buffer = io.BytesIO()
    with zipfile.ZipFile(buffer, "w", zipfile.ZIP_DEFLATED, compresslevel=9) as archive:
        for name in sorted(files):
            entry = zipfile.ZipInfo(name, _EARLIEST)
            entry.compress_type, entry.create_system, entry.external_attr = zipfile.ZIP_DEFLATED, _UNIX, _PLAIN_FILE
            archive.writestr(entry, files[name], compresslevel=9)
    return buffer.getvalue()
