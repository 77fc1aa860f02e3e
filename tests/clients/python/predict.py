"""A prediction through the generated client, as a display engineer's own program would ask for it.

The hours are those of openapi/examples/shortest.json, in an invented room.
"""

import datetime
import sys

from dipcast_client import Client
from dipcast_client.api.predictions import create_prediction
from dipcast_client.models import (
    InlineKind,
    InlineWeather,
    PredictionAnswer,
    PredictionOptions,
    PredictionRequest,
    ProblemDocument,
)
from dipcast_client.types import UNSET


def a_morning(device: str) -> PredictionRequest:
    weather = InlineWeather(
        kind=InlineKind.INLINE,
        start=datetime.datetime(2026, 6, 1, 8, tzinfo=datetime.timezone.utc),
        air_temperature_c=[20.5, 21.0, 21.6, 22.1, 22.4, 22.3],
        relative_humidity_pct=[58, 56, 53, 51, 50, 50],
    )
    return PredictionRequest(device_example=device, weather=weather, options=PredictionOptions(bands=False))


def predicts(client: Client) -> None:
    answer = create_prediction.sync(client=client, body=a_morning("shelf-180"))
    assert isinstance(answer, PredictionAnswer), answer
    assert answer.summary.hours == 6 and answer.summary.cycles > 0, answer.summary
    assert answer.hours is not UNSET and answer.hours and len(answer.hours.cycles) == 6
    assert abs(sum(answer.hours.cycles) - answer.summary.cycles) < 1e-3
    lamp = answer.device.definition.lamp
    assert lamp is None or lamp is UNSET, lamp
    print(f"{answer.summary.cycles:.0f} cycles in {answer.summary.hours:.0f} hours")


def tells_what_is_wrong(client: Client) -> None:
    problem = create_prediction.sync(client=client, body=a_morning("shelf-181"))
    assert isinstance(problem, ProblemDocument), problem
    assert problem.status == 422 and problem.errors, problem
    assert problem.errors[0].pointer == "/device_example", problem.errors
    print(f"refused: {problem.errors[0].detail}")


def main(address: str) -> None:
    with Client(base_url=address) as client:
        predicts(client)
        tells_what_is_wrong(client)


if __name__ == "__main__":
    main(sys.argv[1])
