"""Find where one camera or line-of-sight sensor sees every wall of a room.

``read_plan`` turns a DXF into rooms and ``read_devices`` a device file into devices, ``visibility_kernel`` gives the
points that see every wall of a room, ``verify_kernel`` checks such an answer exactly, and ``visible_region`` gives what
one point sees.
"""

from importlib import import_module
from typing import TYPE_CHECKING, Any

from kernelscan.errors import CertificateError, GeometryError, InputError, KernelscanError

if TYPE_CHECKING:
    from kernelscan.geometry.certificate import verify_kernel
    from kernelscan.geometry.kernel import Kernel, visibility_kernel
    from kernelscan.geometry.visible import visible_region
    from kernelscan.plan import Device, Plan, Room
    from kernelscan.reading import read_devices, read_plan

__all__ = [
    "CertificateError",
    "Device",
    "GeometryError",
    "InputError",
    "Kernel",
    "KernelscanError",
    "Plan",
    "Room",
    "read_devices",
    "read_plan",
    "verify_kernel",
    "visibility_kernel",
    "visible_region",
]

_HOMES = {
    "Device": "kernelscan.plan",
    "Kernel": "kernelscan.geometry.kernel",
    "Plan": "kernelscan.plan",
    "Room": "kernelscan.plan",
    "read_devices": "kernelscan.reading",
    "read_plan": "kernelscan.reading",
    "verify_kernel": "kernelscan.geometry.certificate",
    "visibility_kernel": "kernelscan.geometry.kernel",
    "visible_region": "kernelscan.geometry.visible",
}


def __getattr__(name: str) -> Any:  # noqa: ANN401 - a module attribute of any kind
    """Import a public name when it is first asked for, so that ``import kernelscan`` stays light."""
    if name in _HOMES:
        return getattr(import_module(_HOMES[name]), name)
    raise AttributeError(f"module {__name__!r} has no attribute {name!r}")
