"""Files into values: the only place that opens input, and the only place that knows drawing units."""

from kernelscan.reading.devices import read_devices
from kernelscan.reading.plan_reader import read_plan

__all__ = ["read_devices", "read_plan"]
