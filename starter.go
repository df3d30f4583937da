package hazewright

// Starter returns the text of a study to begin with: one design of iron rods, with
// comments. It loads and can be assessed as it is.
func Starter() string { return starterText }

const starterText = `# A study for hazewright. Assess it with:
#
#   hazewright assess study.yaml --report report.html
#
# Quantities are "number unit": 8 um, 85 mg/m2, 30 t/(t/d), 25 %/yr, -40 degC.
# yr is 365.25 d, sol 88 775.244 s, t 1000 kg. What is left out takes its default;
# the command "hazewright catalogue inputs" lists every key with default, range and source.

study: First look at iron rods
world: mars

# Exactly one of warming, burden, optical_depth. Whole planet, annual mean.
goal: {warming: 10 K}

designs:
  - name: Iron rods
    particles:
      # spread is the geometric standard deviation of length; 1 means one size.
      - {shape: rod, length: 8 um, diameter: 80 nm, material: iron, spread: 1.2}

fate:
  release_height: 2 km
  lift_time: 60 d        # mean wait on the ground before wind lifts a particle
  burial_time: 5 yr      # mean time until it is out of the wind's reach for good
  frost_burial: 3 %/yr   # share carried down by seasonal frost and not returned
  # sticking: 5 %        # chance that two particles that touch stay together. Left out on
                         # purpose: nobody has measured it, and it decides this design.
                         # Without it the study is assessed twice, at 100 % and at 1 %.

supply:
  route: local           # made there; shipped = made at home and landed
  feedstock: {mineral: hematite, grade: 15 %, recovery: 80 %}
  plant: {specific_mass: 25 t/(t/d)}                   # landed plant for each tonne a day
  power: {source: fission, specific_mass: 60 kg/kW}
  release: {points: 40}  # places where particles are let go; with few they clump in the plume
  # What can be landed: plant and power plant come in launch windows, about every 26 months.
  # At 1 % sticking 39 kt a window build the plant up in four windows and reach the goal in
  # about 19 years; at 100 % a programme of this size never gets near what it would take.
  delivery: {payload: 100 t, flights_per_window: 400, first_window: 4 yr, loss: 2 %}

# Bounds that the board sets on figures; "hazewright catalogue figures" lists them.
limits:
  - {figure: production_rate, at_most: 5000 t/d}
  - {figure: sunlight_loss, at_most: 12 %}
  - {figure: time_to_goal, at_most: 50 yr}

# Where your numbers come from; the report prints it beside them.
sources:
  - {at: supply.plant.specific_mass, text: assumption to be replaced by the plant concept}
  - {at: supply.delivery, text: assumption to be replaced by the delivery concept}
`
