"""Where the package's own files lie, in an installed wheel and in a checkout."""

from pathlib import Path


def templates() -> Path:
    """The folder of templates, style sheets and fonts.

    Returns:
        `triage/templates` of an installed wheel, else `templates/` at the top of the checkout.

    >>> (templates() / "layout.html").is_file()
    True
    """
    package = Path(__file__).resolve().parent
    inside = package / "templates"
    return inside if inside.is_dir() else package.parent / "templates"
