"""What can go wrong. An answer that disappoints ("no point sees every wall") is an answer, not an error."""

__all__ = ["CertificateError", "GeometryError", "InputError", "KernelscanError"]


class KernelscanError(Exception):
    """The base of every error that the package raises on purpose; its text is one line for a person."""


class InputError(KernelscanError):
    """A drawing, a device file or an option cannot be used; the text says what, where and what to do.

    ``args`` are its lines, one for each fault that was found.
    """

    def __str__(self) -> str:
        return "\n".join(self.args)


class GeometryError(KernelscanError):
    """Points that do not make a ring, or an eye outside the room."""


class CertificateError(KernelscanError):
    """The exact checker refuses an answer; the text gives the reason."""
