"""The errors that a user meets; each is one sentence that says what, where and what to do."""

from __future__ import annotations


class DxfcableError(Exception):
    """Root of all errors that are the input's, not ours: exit code 2.

    Parameters
    ----------
    message : str
        One sentence: what is wrong and where.
    code : str
        Stable name of the fault, the same that a finding would carry.
    handle, layer : str, optional
        The entity at fault.
    line : int, optional
        Line of the file, counted from 1.
    at : tuple of float, optional
        Position in the drawing [drawing units].
    remedy : str
        What to do about it.
    """

    code = "refused"

    def __init__(
        self,
        message: str,
        *,
        code: str | None = None,
        handle: str | None = None,
        layer: str | None = None,
        line: int | None = None,
        at: tuple[float, float] | None = None,
        remedy: str = "",
    ) -> None:
        super().__init__(message)
        self.message = message
        if code is not None:
            self.code = code
        self.handle = handle
        self.layer = layer
        self.line = line
        self.at = at
        self.remedy = remedy


class DrawingError(DxfcableError, ValueError):
    """The file is no drawing that can be read: not a DXF, cut off, binary, without units."""

    code = "drawing"


class LayoutError(DxfcableError, ValueError):
    """What is drawn cannot be understood; `findings` holds every fault at once."""

    code = "layout"

    def __init__(self, message: str, findings: tuple[object, ...] = ()) -> None:
        super().__init__(message)
        self.findings = findings


class RuleError(DxfcableError, ValueError):
    """No cable satisfies the rule; `least` is the bound that the value must respect, if any."""

    code = "rule"

    def __init__(self, message: str, *, least: float | None = None, is_limit: bool = False) -> None:
        super().__init__(message)
        self.least = least
        self.is_limit = is_limit


class ConvergenceError(DxfcableError, RuntimeError):
    """An iteration did not reach equilibrium; never a half result."""

    code = "convergence"

    def __init__(self, message: str, *, residual: float, iterations: int) -> None:
        super().__init__(message)
        self.residual = residual
        self.iterations = iterations


class OutputError(DxfcableError, OSError):
    """The result cannot be written where it was asked for."""

    code = "output"
