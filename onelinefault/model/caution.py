"""The caution that stands on every output: results can hurt people when they are wrong or misused."""

CAUTION = (
    "Calculated prospective values from the data entered. To be checked by a qualified (where required, licensed) "
    "engineer against local codes, utility data and makers' instructions before use. "
    "Not a lock-out, switching or protective clothing instruction."
)
CAUTION_SHORT = (
    "Calculated prospective values, for checking by a qualified engineer before use. "
    "Not a lock-out, switching or protective clothing instruction."
)
