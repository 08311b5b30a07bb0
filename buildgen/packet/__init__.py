"""What people read: the PDF packet, the lists, and the kit as data."""

from buildgen.packet.kit_json import kit_json
from buildgen.packet.package import Package
from buildgen.packet.write import packet_pdf, write_manifest, write_packet

__all__ = ["Package", "kit_json", "packet_pdf", "write_manifest", "write_packet"]
