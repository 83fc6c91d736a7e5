"""Twenty-five calculations of one invented works: its cooling water, its oil system, its dryer, its boiler house."""

from corpus.calculations import bodies, exchangers, flows, gases, practice, tubes, walls

KINDS = (
    flows.water_pipe,
    flows.oil_line,
    flows.pump,
    flows.ventilation_duct,
    tubes.heated_tube,
    tubes.laminar_tube,
    exchangers.counter_exchanger,
    exchangers.rating,
    walls.insulated_pipe,
    walls.furnace_wall,
    bodies.cooling_part,
    bodies.pin_fin,
    bodies.oil_film,
    gases.air_over_plate,
    gases.still_air_plate,
    gases.gas_line,
    gases.fast_air,
    practice.tube_bundle,
    practice.mass_flow_pipe,
    practice.condenser,
    practice.hot_panel,
    practice.gas_meter,
    practice.cooled_rod,
    practice.crossed_cylinder,
    practice.fouled_exchanger,
)
