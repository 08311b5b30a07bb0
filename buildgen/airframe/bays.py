"""Motor bays: where along the span a mount is carried, and by which two ribs."""

from __future__ import annotations

from dataclasses import dataclass

from buildgen.airframe.surface import Panel, WingShape
from buildgen.design.schema import Power
from buildgen.problems import DesignError, Problem


@dataclass(frozen=True, eq=False)
class Bay:
    """The bay of one motor on the starboard side.

    Attributes:
        index: counted from the root, from 1.
        span_mm: of the motor's station along the span.
        s_mm: the same along its panel.
        half_mm: half the clear width between the two ribs.
        rib_mm: thickness of those ribs.
        rear: the mount sits on the trailing edge.
    """

    index: int
    panel: Panel
    span_mm: float
    s_mm: float
    half_mm: float
    rib_mm: float
    rear: bool = False

    @property
    def inner_face_mm(self) -> float:
        """Along the panel: outside face of the inboard rib."""
        return self.s_mm - self.half_mm - self.rib_mm

    @property
    def outer_face_mm(self) -> float:
        """Along the panel: outside face of the outboard rib."""
        return self.s_mm + self.half_mm + self.rib_mm


def stations(power: Power, half_span_mm: float) -> tuple[float, ...]:
    """Motor stations along the starboard span, from the root out."""
    if power.stations_mm:
        return tuple(sorted(power.stations_mm))
    count = power.motors // 2
    spacing = power.spacing_mm or half_span_mm / (count + 0.5)
    first = power.first_mm if power.first_mm is not None else spacing
    return tuple(first + i * spacing for i in range(count))


def make_bays(power: Power | None, wing: WingShape, rib_mm: float) -> tuple[Bay, ...]:
    """The bays of the starboard side.

    Raises:
        DesignError: a bay lies beyond the tip, over a break between panels or over its neighbour.
    """
    if power is None or power.place != "wing":
        return ()
    bays: list[Bay] = []
    problems: list[Problem] = []
    for i, span in enumerate(stations(power, wing.half_span_mm), start=1):
        panel, s = wing.at(span)
        bay = Bay(i, panel, span, s, power.mount.bay_mm / 2, rib_mm,
                  power.mount.edge == "trailing")
        problems += _faults(bay, bays[-1] if bays else None)
        bays.append(bay)
    if problems:
        raise DesignError(*problems)
    return tuple(bays)


def on_edge(bays: tuple[Bay, ...], panel: Panel, rear: bool) -> list[Bay]:
    """The bays of a panel whose mounts sit on its leading or on its trailing edge."""
    return [b for b in bays if b.panel is panel and b.rear == rear]


def _faults(bay: Bay, before: Bay | None) -> list[Problem]:
    where = f"The bay of motor {bay.index} at {bay.span_mm:g} mm"
    key = "power.stations_mm" if before is None else "power.spacing_mm"
    panel = bay.panel
    found = []
    ends_mm = (2 * bay.rib_mm, panel.length_mm - 2 * bay.rib_mm)
    if bay.inner_face_mm < ends_mm[0] or bay.outer_face_mm > ends_mm[1]:
        low, high = (panel.start_mm + e for e in ends_mm)
        found.append(
            Problem(
                key,
                f"{where} reaches over the end of panel {panel.index + 1}.",
                f"Its ribs need {bay.half_mm + bay.rib_mm:g} mm each way between"
                f" {low:g} and {high:g} mm; move the motor or the break.",
            )
        )
    if before and before.panel is panel and bay.inner_face_mm < before.outer_face_mm + 5:
        found.append(
            Problem(key, f"{where} runs into the bay of motor {before.index}.",
                    "Give the motors more spacing, or the mounts a narrower bay_mm.")
        )
    return found
