"""Mean and film temperatures and differences, K."""

from cellfuncs.checks.relation import relation


@relation("mean of inlet and outlet temperature", "property_temperature", source="common practice", streams=True)
def mean_of_ends(inlet_temperature, outlet_temperature):
    """(Tin + Tout)/2."""
    return (inlet_temperature + outlet_temperature) / 2.0


@relation("film temperature in a stream", "property_temperature", source="common practice")
def film(wall_temperature, stream_temperature):
    """(Tw + T∞)/2."""
    return (wall_temperature + stream_temperature) / 2.0


@relation("film temperature against still surroundings", "property_temperature", source="common practice")
def film_to_surroundings(wall_temperature, ambient_temperature):
    """(Tw + Ta)/2."""
    return (wall_temperature + ambient_temperature) / 2.0


@relation("film temperature in a duct", "property_temperature", source="common practice")
def film_in_duct(wall_temperature, inlet_temperature, outlet_temperature):
    """(Tw + (Tin + Tout)/2)/2."""
    return (wall_temperature + (inlet_temperature + outlet_temperature) / 2.0) / 2.0


@relation("film temperature at the inlet", "property_temperature", source="common practice")
def film_at_inlet(wall_temperature, inlet_temperature):
    """(Tw + Tin)/2."""
    return (wall_temperature + inlet_temperature) / 2.0


@relation("mean of the walls", "property_temperature", source="common practice", flows=("gap", "enclosure"))
def mean_of_walls(wall_temperature, second_wall_temperature):
    """(T1 + T2)/2."""
    return (wall_temperature + second_wall_temperature) / 2.0


@relation("difference of wall and stream", "temperature_difference")
def to_stream(wall_temperature, stream_temperature):
    """|Tw − T∞|."""
    return abs(wall_temperature - stream_temperature)


@relation("difference of wall and surroundings", "temperature_difference")
def to_ambient(wall_temperature, ambient_temperature):
    """|Tw − Ta|."""
    return abs(wall_temperature - ambient_temperature)


@relation("difference of two walls", "temperature_difference")
def between_walls(wall_temperature, second_wall_temperature):
    """|T1 − T2|."""
    return abs(wall_temperature - second_wall_temperature)


@relation("difference of wall and inlet", "temperature_difference", derives=False)
def to_inlet(wall_temperature, inlet_temperature):
    """|Tw − Tin|."""
    return abs(wall_temperature - inlet_temperature)


@relation("difference of inlet and surroundings", "temperature_difference", derives=False)
def inlet_to_ambient(inlet_temperature, ambient_temperature):
    """|Tin − Ta|."""
    return abs(inlet_temperature - ambient_temperature)


@relation("difference of initial and surrounding temperature", "temperature_difference", derives=False)
def initial_to_stream(initial_temperature, stream_temperature):
    """|Ti − T∞|."""
    return abs(initial_temperature - stream_temperature)


@relation("rise along the stream", "temperature_difference", derives=False, streams=True)
def ends(inlet_temperature, outlet_temperature):
    """|Tout − Tin|."""
    return abs(outlet_temperature - inlet_temperature)


@relation("rise of the stream", "bulk_rise")
def rise(inlet_temperature, outlet_temperature):
    """|Tout − Tin|."""
    return abs(outlet_temperature - inlet_temperature)
