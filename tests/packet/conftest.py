"""One example packet for all tests of this room."""

from __future__ import annotations

import pypdfium2
import pytest

from buildgen.packet import Package, packet_pdf

from .example_kit import package as example


@pytest.fixture(scope="session")
def package() -> Package:
    return example()


@pytest.fixture(scope="session")
def pdf_bytes(package: Package) -> bytes:
    return packet_pdf(package)


@pytest.fixture(scope="session")
def pages(pdf_bytes: bytes) -> list[str]:
    """Text of each page, as a reader would select it, on one line."""
    document = pypdfium2.PdfDocument(pdf_bytes)
    return [
        " ".join(page.get_textpage().get_text_range().replace("\u00a0", " ").split())
        for page in document
    ]
