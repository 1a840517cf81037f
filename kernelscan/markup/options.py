"""What a person may choose about the sheets; every field has a default that works."""

from dataclasses import dataclass

from kernelscan.markup.paper import paper_by_name, scale_by_text
from kernelscan.tolerances import Tolerances

__all__ = ["SheetOptions", "check_options"]


DEFAULT_TOLERANCES = Tolerances()


@dataclass(frozen=True, slots=True)
class SheetOptions:
    """Paper, scale, and the fields of the title block (ISO 7200); an empty field is a blank line to write on.

    Attributes
    ----------
    paper
        ``A4`` to ``A0``, ``letter``, ``ANSI B`` to ``ANSI E``; ``None`` chooses.
    scale
        ``1:50`` or ``1/4" = 1'-0"``; ``None`` chooses.
    owner, number, date, title, creator, approver, document_type
        Fields of the title block. The date of issue is printed as it is given; no clock is read.
    tolerances
        With which the drawing was read.
    """

    paper: str | None = None
    scale: str | None = None
    owner: str = ""
    number: str = ""
    date: str = ""
    title: str = ""
    creator: str = ""
    approver: str = ""
    document_type: str = ""
    tolerances: Tolerances = DEFAULT_TOLERANCES


def check_options(options: SheetOptions) -> None:
    """Raise ``InputError`` where there is no such paper or scale, before any work is done for it."""
    if options.paper is not None:
        paper_by_name(options.paper)
    if options.scale is not None:
        scale_by_text(options.scale)
