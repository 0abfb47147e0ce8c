"""Stock: the chains, ropes and rods that members are made of, by the standards and of the user's own."""

from typing import Annotated, Any

from pydantic import BeforeValidator, ValidationInfo

from geom.errors import say
from geom.fields import known as context
from geom.fields import look_up
from geom.setting.stock.entry import Measured, StockEntry
from geom.setting.stock.names import find, find_base, known, suggestion
from geom.setting.stock.own import Faulty, user_stock
from geom.setting.stock.record import Stock, use_of_capacity

__all__ = [
    "Faulty",
    "Measured",
    "Stock",
    "StockEntry",
    "StockRef",
    "find",
    "find_base",
    "known",
    "use_of_capacity",
    "user_stock",
]


def _stock(raw: Any, info: ValidationInfo) -> Stock:  # noqa: ANN401 - as the file has it
    if isinstance(raw, Stock):
        return raw
    if not isinstance(raw, str):
        raise ValueError(f'{say(raw)} is no stock; give its name in quotes, like "DIN 763-8"')
    own = context(info).named.get("stock", {})
    if raw in own:
        mine: Stock = look_up("stock", raw, info)
        return mine
    try:
        return find(raw)
    except ValueError as error:
        if own and "there is no stock" in str(error):
            raise ValueError(f"there is no stock {say(raw)}{suggestion(raw, tuple(own))}") from error
        raise


StockRef = Annotated[Stock, BeforeValidator(_stock)]
