"""How a plain figure is written on a page: all its digits, thousands set apart, with the shop's decimal mark."""

from logbook.core.figures import MINUS

THIN = "\u202f"  # a narrow space that never breaks


def written(value: float, decimal_mark: str = ".", *, apart: str = "") -> str:
    """Write a stored figure with the digits it was typed with; `apart` stands between thousands.

    >>> written(4210.0), written(1038.35, ","), written(12345.5, apart=" ")
    ('4210', '1038,35', '12 345.5')
    """
    text = f"{value:.12g}".replace("-", MINUS)
    whole, mark, rest = text.partition(".")
    sign, digits = (whole[0], whole[1:]) if whole[0] == MINUS else ("", whole)
    if apart and digits.isdecimal():
        digits = f"{int(digits):,}".replace(",", apart)
    return sign + digits + (decimal_mark + rest if mark else "")
