"""The caution that stands wherever a result is shown."""

CAUTION = (
    "Heads under tension burst and rims fail: these are estimates that do not replace the "
    "maker's ratings, local codes or licensed practice."
)
