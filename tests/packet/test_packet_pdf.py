"""The PDF, read back by an independent reader (PDFium)."""

from __future__ import annotations

import re
import subprocess
import sys
from dataclasses import replace
from pathlib import Path

import numpy as np
import pypdfium2
import pytest

from buildgen.checks.report import Check
from buildgen.packet import Package, kit_json, packet_pdf, words
from buildgen.packet.amounts import fixed

from .example_kit import LONG


def between(pages: list[str], start: str, end: str | None) -> str:
    """Text from the page that begins a chapter to the page before the next one."""
    first = next(i for i, t in enumerate(pages) if re.search(rf"\) {start}\b", t) or
                 t.find(start) in range(0, 120))
    last = len(pages)
    if end is not None:
        last = next(i for i, t in enumerate(pages) if i > first and t.find(end) in range(0, 120))
    return " ".join(pages[first:last])


def test_every_page_is_a4_and_says_what_it_belongs_to(
    package: Package, pdf_bytes: bytes, pages: list[str]
) -> None:
    # ISO 216: A4 is 210 x 297 mm.
    document = pypdfium2.PdfDocument(pdf_bytes)
    for number, page in enumerate(document, start=1):
        size_mm = np.array(page.get_size()) * 25.4 / 72
        assert size_mm == pytest.approx((210, 297), abs=0.01)
        assert package.kit.title.line in pages[number - 1]
        assert f"page {number} of {len(document)}" in pages[number - 1]
        assert words.NOT_APPROVAL_SHORT in pages[number - 1]


def test_text_agrees_with_the_data(package: Package, pages: list[str]) -> None:
    data = kit_json(package)
    balance = data["balance"]
    front = pages[0]
    assert f"{fixed(balance['mass_g'])} ± {fixed(balance['mass_sigma_g'])} g" in front
    assert f"{fixed(abs(balance['cg_mm'][0]))} ± {fixed(balance['cg_sigma_mm'])} mm" in front
    assert words.AHEAD_OF_LE in front
    assert f"{fixed(balance['static_margin'] * 100)} %" in front
    weights = between(pages, words.BALANCE, words.CHECKS)
    for row in balance["table"]:
        assert f"{row['group']} {fixed(row['mass_g'])} {fixed(row['mass_sigma_g'])}" in weights
    sheets = between(pages, words.SHEETS, words.PRINTS)
    for sheet in data["sheets"]:
        assert sheet["file"].removesuffix(".dxf") in sheets
        assert f"cut length {fixed(sheet['cut_length_mm'] / 1000, 2)} m" in sheets


def test_every_part_stands_in_the_index_and_in_one_step(
    package: Package, pages: list[str]
) -> None:
    index = between(pages, words.INDEX, None)
    steps = between(pages, words.STEPS, words.FLIGHT)
    for part in package.kit.parts:
        assert len(re.findall(rf"(?<!\w){part.id} {re.escape(part.name[:12])}", index)) == 1
        ticked = rf"☐ {part.id} (\d+ x )?{re.escape(part.name[:12])}"
        assert len(re.findall(ticked, steps)) == 1, part.id
    assert steps.count("☐") == len(package.kit.parts)


def test_steps_come_in_the_order_of_the_kit(package: Package, pages: list[str]) -> None:
    steps = between(pages, words.STEPS, words.FLIGHT)
    places = [steps.index(f"{n} {name}") for n, name in enumerate(package.kit.steps, start=1)]
    assert places == sorted(places)


def test_long_names_wrap_and_accents_come_out(pages: list[str]) -> None:
    everything = " ".join(pages)
    assert LONG in everything
    assert "Rohrammer für Prüfflüge" in pages[0]
    assert "Übungsflugzeug" in pages[0]
    assert "Rippe 7 außen" in everything


def test_checks_stand_worst_first_with_their_advice(pages: list[str]) -> None:
    checks = between(pages, words.CHECKS, words.BILL)
    found = re.findall(r"✕ FAIL|▲ warn|✓ pass", checks)
    assert found == ["✕ FAIL", "▲ warn", "✓ pass", "✓ pass"]
    assert "Move the outer motors 6 mm outwards." in checks
    assert "1 failed, 1 with a warning, 2 passed." in checks


def test_no_approval_is_claimed(pages: list[str]) -> None:
    assert "Nothing in this packet is an airworthiness approval" in pages[1]


def test_reader_finds_bookmarks_information_and_true_scale(
    package: Package, pdf_bytes: bytes
) -> None:
    document = pypdfium2.PdfDocument(pdf_bytes)
    top = [b.get_title() for b in document.get_toc() if b.level == 0]
    assert top == [package.kit.title.title, words.CAUTIONS, words.BALANCE, words.CHECKS,
                   words.BILL, words.SHEETS, words.PRINTS, words.STICKS, words.STEPS, words.FLIGHT,
                   words.INDEX]
    steps = [b.get_title() for b in document.get_toc() if b.level == 1]
    assert [words.STEP.format(number=n, name=s)
            for n, s in enumerate(package.kit.steps, start=1)] == steps[-len(package.kit.steps):]
    about = document.get_metadata_dict()
    assert about["Title"].startswith(package.kit.title.title)
    assert about["Subject"] == package.kit.title.line
    # PDF 1.7 (ISO 32000-1), 12.2: viewer preference PrintScaling None.
    assert re.search(rb"/PrintScaling\s*/None", pdf_bytes)


def test_all_letters_are_embedded(pdf_bytes: bytes) -> None:
    fonts = set(re.findall(rb"/BaseFont\s*/([\w+-]+)", pdf_bytes))
    assert fonts
    assert all(re.match(rb"[A-Z]{6}\+", name) for name in fonts), fonts
    assert pdf_bytes.count(b"/FontFile2") >= len(fonts)


def test_nothing_is_drawn_off_the_page_or_into_its_margin(pdf_bytes: bytes) -> None:
    """Ink stays at least 10 mm from every edge; every page has some."""
    for page in pypdfium2.PdfDocument(pdf_bytes):
        grey = np.asarray(page.render(scale=72 / 25.4 * 2 / 72 * 25.4).to_pil().convert("L"))
        per_mm = grey.shape[1] / 210
        rows, columns = np.nonzero(grey < 250)
        assert len(rows) > 500
        assert columns.min() / per_mm > 10
        assert (grey.shape[1] - columns.max()) / per_mm > 10
        assert rows.min() / per_mm > 8
        assert (grey.shape[0] - rows.max()) / per_mm > 8


def test_text_boxes_do_not_overlap(pdf_bytes: bytes) -> None:
    """No letter lies on a letter of another line of text."""
    for page in pypdfium2.PdfDocument(pdf_bytes):
        letters = page.get_textpage()
        boxes = []
        for index in range(letters.count_chars()):
            if letters.get_text_range(index, 1).strip():
                boxes.append(letters.get_charbox(index))
        box = np.array(boxes)
        area = (box[:, 2] - box[:, 0]) * (box[:, 3] - box[:, 1])
        wide = np.minimum(box[:, None, 2], box[None, :, 2]) - np.maximum(
            box[:, None, 0], box[None, :, 0])
        tall = np.minimum(box[:, None, 3], box[None, :, 3]) - np.maximum(
            box[:, None, 1], box[None, :, 1])
        shared = np.clip(wide, 0, None) * np.clip(tall, 0, None)
        np.fill_diagonal(shared, 0)
        least = np.minimum(area[:, None], area[None, :])
        assert (shared <= 0.25 * np.maximum(least, 1e-6) + 0.05).all()


def test_bytes_do_not_depend_on_the_process(pdf_bytes: bytes) -> None:
    root = Path(__file__).parents[2]
    code = (
        "import sys, hashlib; sys.path[:0] = sys.argv[1:];"
        "from packet.example_kit import package; from buildgen.packet import packet_pdf;"
        "sys.stdout.buffer.write(packet_pdf(package()))"
    )
    made = subprocess.run(
        [sys.executable, "-c", code, str(root), str(root / "tests")],
        capture_output=True, check=True, env={"PYTHONHASHSEED": "4711"},
    )
    assert made.stdout == pdf_bytes


def test_a_packet_without_sheets_prints_sticks_or_checks_is_whole(package: Package) -> None:
    bare = replace(package, sheets=(), stick_plans=(), checks=(),
                   kit=replace(package.kit, parts=package.kit.of("bought", "allowance")))
    document = pypdfium2.PdfDocument(packet_pdf(bare))
    text = " ".join(p.get_textpage().get_text_range() for p in document)
    assert words.NO_CHECKS in text
    assert words.SHEETS not in text


def test_marks_of_the_page_language_are_words(package: Package) -> None:
    title = replace(package.kit.title, title="R&D <b>wing</b> & more", name="r-and-d")
    odd = replace(package, kit=replace(package.kit, parts=package.kit.of("bought"), title=title),
                  sheets=(), stick_plans=(), checks=())
    first = pypdfium2.PdfDocument(packet_pdf(odd))[0].get_textpage().get_text_range()
    assert "R&D <b>wing</b> & more" in first


def test_first_flight_page_has_room_for_what_is_measured(
    package: Package, pages: list[str]
) -> None:
    flight = between(pages, words.FLIGHT, words.INDEX)
    balance = kit_json(package)["balance"]
    assert f"{fixed(balance['mass_g'])} ± {fixed(balance['mass_sigma_g'])} g" in flight
    assert f"{fixed(balance['target_cg_x_mm'][0])} … " in flight
    assert words.MEASURED in flight
    assert flight.count("☐") == 11, "seven figures, four things to look over"


def test_cautions_stand_where_the_work_is_done(pages: list[str]) -> None:
    points = {place: points[0][:30] for place, _, points in words.CAUTION_GROUPS}
    steps = between(pages, words.STEPS, words.FLIGHT)
    assert points["glue"] in steps
    assert points["propeller"] in steps[steps.index("4 Power"):]
    assert points["battery"] in steps[steps.index("5 Equipment"):]
    assert points["cut"] in between(pages, words.SHEETS, words.PRINTS)
    assert points["print"] in between(pages, words.PRINTS, words.STICKS)


def test_many_parts_make_as_many_pages_as_they_need(package: Package) -> None:
    checks = tuple(Check(f"c{n}", f"Check number {n}", "pass", 1.0, 2.0, "N", "basis " * 30)
                   for n in range(60))
    more = pypdfium2.PdfDocument(packet_pdf(replace(package, checks=checks)))
    text = " ".join(" ".join(p.get_textpage().get_text_range().split()) for p in more)
    assert all(f"Check number {n} " in text for n in range(60))
    assert text.count("Method and source") >= 3, "the head repeats on every page"
