"""Parameter types of the command line: text in, values out, click's own refusal."""

from collections.abc import Callable
from typing import TYPE_CHECKING, Any, Final

import click
from click.core import ParameterSource

from profiler.cli.characters import number_from
from profiler.cli.points import EastingNorthing, LatLon, SiteName, parse_point
from profiler.cli.quantities import (
    parse_height,
    parse_ke,
    parse_kr,
    parse_length,
    parse_n_gradient,
)
from profiler.errors import InputError

PointValue = LatLon | EastingNorthing | SiteName

if TYPE_CHECKING:
    _FloatParam = click.ParamType[float]
    _PointParam = click.ParamType[PointValue]
    _AnyParam = click.ParamType[Any]
else:  # click before 8.4 cannot be subscripted
    _FloatParam = _PointParam = _AnyParam = click.ParamType


class QuantityType(_FloatParam):
    """A number with or without its unit, brought into SI or a ratio."""

    def __init__(self, name: str, parse: Callable[[str], float]) -> None:
        """Take the name that help shows and the parser that raises InputError."""
        self.name = name
        self._parse = parse

    def convert(
        self,
        value: str | float,
        param: click.Parameter | None,
        ctx: click.Context | None,
    ) -> float:
        """Value in SI, or click's usage error (exit 2) with the parser's sentence."""
        if not isinstance(value, str):
            return float(value)
        try:
            return self._parse(value)
        except InputError as error:
            self.fail(str(error), param, ctx)


class PointType(_PointParam):
    """A point of the Earth, of a grid, or the name of a site.

    Two plain numbers are easting, northing when the parameter named ``crs_param`` was
    given. Declare that option with ``is_eager=True``, or click reads it too late.
    """

    name = "point"

    def __init__(self, crs_param: str = "crs") -> None:
        """Take the name of the parameter that states a CRS."""
        self.crs_param = crs_param

    def convert(
        self,
        value: str | PointValue,
        param: click.Parameter | None,
        ctx: click.Context | None,
    ) -> PointValue:
        """Place, or click's usage error (exit 2) with the parser's sentence."""
        if not isinstance(value, str):
            return value
        try:
            return parse_point(value, crs_given=self._crs_given(ctx))
        except InputError as error:
            self.fail(str(error), param, ctx)

    def _crs_given(self, ctx: click.Context | None) -> bool:
        """Whether somebody stated a CRS; the value itself may be click's "unset"."""
        source = ctx.get_parameter_source(self.crs_param) if ctx else None
        return source not in (None, ParameterSource.DEFAULT)


#: 57.1,-4.2 and its relatives.
POINT: Final = PointType()
#: 20m, 65ft; metres inside.
HEIGHT: Final = QuantityType("height", parse_height)
#: 50m, 12km; metres inside, 0 or more.
LENGTH: Final = QuantityType("length", parse_length)
#: 4/3; a ratio above 0.
KE: Final = QuantityType("ke", parse_ke)
#: 0.13; a ratio of either sign.
KR: Final = QuantityType("kr", parse_kr)
#: -39; N-units a kilometre.
N_GRADIENT: Final = QuantityType("N/km", parse_n_gradient)


class RadioType(_AnyParam):
    """A quantity of the radio room, whose parser is loaded only when one is given."""

    def __init__(self, name: str, parser: str) -> None:
        """Take the name that help shows and the name of the parser."""
        self.name = name
        self._parser = parser

    def convert(
        self, value: Any, param: click.Parameter | None, ctx: click.Context | None
    ) -> Any:
        """Value of the parser, or click's usage error (exit 2) with its sentence."""
        if not isinstance(value, str):
            return value
        from profiler.cli import radio_quantities

        try:
            return getattr(radio_quantities, self._parser)(value)
        except InputError as error:
            self.fail(str(error), param, ctx)


#: 7.5GHz; hertz inside.
FREQUENCY: Final = RadioType("frequency", "parse_frequency")
#: "ke=4/3 f1=0.6 extra=3m"; a Criterion.
CRITERION: Final = RadioType("criterion", "parse_criterion")
#: 1.6; a plain number.
NUMBER: Final = QuantityType("number", number_from)
