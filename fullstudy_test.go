package hazewright

// fullStudy gives every key of the study file once.
const fullStudy = `study: Kettle Plain thaw, concept phase
world: {base: mars, surface_pressure: 700 Pa, dust_optical_depth: 0.3, lapse_limit: 2.5 K/km}
goal: {warming: 25 K}
designs:
  - name: Iron rods
    particles:
      - {shape: rod, length: 8 um, diameter: 80 nm, material: iron, spread: 1.2, oxide: 3 nm}
  - name: Tuned mix
    particles:
      - {shape: rod, length: 6 um, diameter: 100 nm, material: aluminium, share: 40 %}
      - {shape: rod, length: 13 um, diameter: 100 nm, material: aluminium, share: 60 %}
    supply:
      feedstock: {mineral: alumina}
  - name: Ice veil
    particles: [{shape: sphere, radius: 12 um, material: water-ice}]
    fate: {profile: {layer: [25 km, 35 km]}, vapour: saturated}
  - name: Printed rod, as published
    particles: [{shape: rod, length: 10 um, diameter: 120 nm, material: aluminium}]
    given: {lifetime: 10 yr}
  - name: Frosted shells
    particles: [{shape: shell, radius: 4 um, wall: 30 nm, core: water-ice, material: aluminium}]
benchmarks:
  - {design: "Printed rod, as published", figure: burden, value: 150 mg/m2, source: "report Q, table 2"}
fate:
  release_height: 2 km
  lift_height: 1 km
  profile: computed
  eddy_diffusivity: 300 m2/s
  deposition: 0 mm/s
  lift_time: 60 d
  burial_time: 5 yr
  frost_burial: 3 %/yr
  sticking: 5 %
  charge: 0
  dust: on
  aggregate_value: 0 %
  vapour: dry
  sinks: [{name: caps, rate: 1 %/yr}]
  return_single: 100 %
supply:
  route: local
  overbuild: 25 %
  feedstock: {mineral: hematite, grade: 15 %, recovery: 80 %}
  energy: {mining: 0.3 MJ/kg, reduction: 20 MJ/kg, shaping: 40 MJ/kg, release: 0.5 MJ/kg}
  availability: 85 %
  plant: {specific_mass: 25 t/(t/d), spares: 5 %/yr, life: 20 yr, commissioning: 1 yr}
  power: {source: fission, specific_mass: 60 kg/kW}
  release: {points: 12, radius: 5 m, wind: 5 m/s, spreading: 0.1}
  release_loss: 2 %
  delivery: {payload: 60 t, flights_per_window: 12, window_spacing: 779.94 d, first_window: 4 yr, loss: 2 %}
  stop_at: 80 yr
limits:
  - {figure: production_rate, at_most: 5000 t/d}
  - {figure: landed_mass, at_most: 60 kt}
  - {figure: sunlight_loss, at_most: 12 %}
model: {warming_factor: 1, kappa_factor: 1, fall_speed_factor: 1, kernel_factor: 1}
uncertain:
  - {at: fate.burial_time, law: loguniform, low: 1 yr, high: 30 yr}
  - {at: fate.sticking, law: loguniform, low: 0.1 %, high: 100 %}
  - {at: model.warming_factor, law: lognormal, median: 1, spread: 1.3}
  - {at: "designs[Iron rods].particles[0].diameter", law: normal, mean: 80 nm, sd: 8 nm}
  - {at: supply.availability, law: triangular, low: 50 %, mode: 85 %, high: 95 %}
sweeps:
  - {name: Burial, at: fate.burial_time, from: 0.5 yr, to: 50 yr, points: 25, scale: log}
sources:
  - {at: supply.plant.specific_mass, text: "plant concept note 7, rev B"}
`
