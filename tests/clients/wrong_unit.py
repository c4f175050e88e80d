"""Must not pass the type checker: a pressure where a length belongs."""

from brakewright_client.models import Length, PressureUnit

Length(value=210, unit=PressureUnit.POUND_FORCE_PER_SQUARE_INCH)
