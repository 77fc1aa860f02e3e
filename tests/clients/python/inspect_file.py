"""A file is looked at before it is used: what is found comes back as a layout, and the layout goes with the prediction.

The file is made up: a logger's in an invented shop, with semicolons and decimal commas.
"""

import io
import sys

from dipcast_client import Client
from dipcast_client.api.predictions import create_prediction
from dipcast_client.api.weather import create_weather_inspection
from dipcast_client.models import (
    CsvLayout,
    InspectionForm,
    PredictionAnswer,
    PredictionForm,
    PredictionOptions,
    PredictionRequest,
    UploadedWeather,
    UploadKind,
    WeatherInspection,
)
from dipcast_client.types import UNSET, File


def readings() -> File:
    lines = ["Time (UTC);Air temperature [°C];Relative humidity [%]"]
    for hour in range(48):
        temperature = f"{20 + hour % 24 / 8:.2f}".replace(".", ",")
        lines.append(f"{14 + hour // 24}.06.2026 {hour % 24:02}:00;{temperature};{60 - hour % 24}")
    return File(payload=io.BytesIO("\n".join(lines).encode()), file_name="shop.csv", mime_type="text/csv")


def inspects(client: Client) -> CsvLayout:
    found = create_weather_inspection.sync(client=client, body=InspectionForm(weather=readings()))
    assert isinstance(found, WeatherInspection), found
    assert found.ready and not found.questions and not found.faults, found
    assert (found.form.delimiter, found.form.decimal) == (";", ","), found.form
    assert found.readings is not UNSET and found.readings and found.readings.count == 48, found.readings
    quantities = [column.quantity for column in found.columns]
    assert "air_temperature" in quantities and "relative_humidity" in quantities, quantities
    print(f"{found.readings.count} readings from {found.readings.from_} to {found.readings.to}")
    return found.layout


def predicts(client: Client, layout: CsvLayout) -> None:
    request = PredictionRequest(
        device_example="shelf-180",
        weather=UploadedWeather(kind=UploadKind.UPLOAD, layout=layout),
        options=PredictionOptions(bands=False),
    )
    answer = create_prediction.sync(client=client, body=PredictionForm(request=request, weather=readings()))
    assert isinstance(answer, PredictionAnswer), answer
    assert answer.summary.hours == 48 and answer.summary.cycles > 0, answer.summary
    print(f"{answer.summary.cycles:.0f} cycles in {answer.summary.hours:.0f} hours")


def main(address: str) -> None:
    with Client(base_url=address) as client:
        predicts(client, inspects(client))


if __name__ == "__main__":
    main(sys.argv[1])
