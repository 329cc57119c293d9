-- Every stored point as one row, for ad-hoc queries and other tools. All SI; null where a point has no such value.
-- point counts from 0 in the order of the study's sweep. outcome 0 is an evaluated point, any other number the reason
-- for which it has no values; limits_not_met and notes are masks, one bit a limit or note, lowest first.
-- Always name the run: WHERE run_id = '…'.
CREATE VIEW "run_point" AS
  SELECT
    r.id AS run_id,
    (rc.first_point + v.n - 1)::integer AS point,
    v.outcome::integer AS outcome,
    nullif(v.limits_not_met, 'NaN')::integer AS limits_not_met,
    nullif(v.outside_area_m2, 'NaN') AS outside_area_m2,
    nullif(v.tube_length_m, 'NaN') AS tube_length_m,
    nullif(v.duty_w, 'NaN') AS duty_w,
    nullif(v.overall_coefficient_w_m2k, 'NaN') AS overall_coefficient_w_m2k,
    nullif(v.mean_coefficient_w_m2k, 'NaN') AS mean_coefficient_w_m2k,
    nullif(v.coolant_pressure_drop_pa, 'NaN') AS coolant_pressure_drop_pa,
    nullif(v.vapour_pressure_drop_pa, 'NaN') AS vapour_pressure_drop_pa,
    nullif(v.saturation_temperature_drop_k, 'NaN') AS saturation_temperature_drop_k,
    nullif(v.coolant_velocity_m_s, 'NaN') AS coolant_velocity_m_s,
    nullif(v.coolant_mass_flow_kg_s, 'NaN') AS coolant_mass_flow_kg_s,
    nullif(v.coolant_outlet_temperature_k, 'NaN') AS coolant_outlet_temperature_k,
    nullif(v.mean_wall_subcooling_k, 'NaN') AS mean_wall_subcooling_k,
    nullif(v.tube_count, 'NaN') AS tube_count,
    nullif(v.tube_mass_kg, 'NaN') AS tube_mass_kg,
    nullif(v.pumping_power_w, 'NaN') AS pumping_power_w,
    nullif(v.yearly_cost, 'NaN') AS yearly_cost,
    nullif(v.bundle_width_m, 'NaN') AS bundle_width_m,
    nullif(v.bundle_height_m, 'NaN') AS bundle_height_m,
    nullif(v.notes, 'NaN')::bigint AS notes
  FROM run r
  JOIN run_chunk rc ON rc.run_id = r.id
  CROSS JOIN LATERAL (
    -- One array a column and chunk: max only picks it.
    SELECT
      max(pc.vals) FILTER (WHERE pc."column" = 'outcome') AS outcome,
      max(pc.vals) FILTER (WHERE pc."column" = 'limits_not_met') AS limits_not_met,
      max(pc.vals) FILTER (WHERE pc."column" = 'outside_area_m2') AS outside_area_m2,
      max(pc.vals) FILTER (WHERE pc."column" = 'tube_length_m') AS tube_length_m,
      max(pc.vals) FILTER (WHERE pc."column" = 'duty_w') AS duty_w,
      max(pc.vals) FILTER (WHERE pc."column" = 'overall_coefficient_w_m2k') AS overall_coefficient_w_m2k,
      max(pc.vals) FILTER (WHERE pc."column" = 'mean_coefficient_w_m2k') AS mean_coefficient_w_m2k,
      max(pc.vals) FILTER (WHERE pc."column" = 'coolant_pressure_drop_pa') AS coolant_pressure_drop_pa,
      max(pc.vals) FILTER (WHERE pc."column" = 'vapour_pressure_drop_pa') AS vapour_pressure_drop_pa,
      max(pc.vals) FILTER (WHERE pc."column" = 'saturation_temperature_drop_k') AS saturation_temperature_drop_k,
      max(pc.vals) FILTER (WHERE pc."column" = 'coolant_velocity_m_s') AS coolant_velocity_m_s,
      max(pc.vals) FILTER (WHERE pc."column" = 'coolant_mass_flow_kg_s') AS coolant_mass_flow_kg_s,
      max(pc.vals) FILTER (WHERE pc."column" = 'coolant_outlet_temperature_k') AS coolant_outlet_temperature_k,
      max(pc.vals) FILTER (WHERE pc."column" = 'mean_wall_subcooling_k') AS mean_wall_subcooling_k,
      max(pc.vals) FILTER (WHERE pc."column" = 'tube_count') AS tube_count,
      max(pc.vals) FILTER (WHERE pc."column" = 'tube_mass_kg') AS tube_mass_kg,
      max(pc.vals) FILTER (WHERE pc."column" = 'pumping_power_w') AS pumping_power_w,
      max(pc.vals) FILTER (WHERE pc."column" = 'yearly_cost') AS yearly_cost,
      max(pc.vals) FILTER (WHERE pc."column" = 'bundle_width_m') AS bundle_width_m,
      max(pc.vals) FILTER (WHERE pc."column" = 'bundle_height_m') AS bundle_height_m,
      max(pc.vals) FILTER (WHERE pc."column" = 'notes') AS notes
    FROM point_column pc
    WHERE pc.planned_on = r.planned_on AND pc.run_id = r.id AND pc.chunk = rc.chunk
  ) c
  CROSS JOIN LATERAL unnest(
    c.outcome, c.limits_not_met, c.outside_area_m2, c.tube_length_m, c.duty_w, c.overall_coefficient_w_m2k, c.mean_coefficient_w_m2k, c.coolant_pressure_drop_pa, c.vapour_pressure_drop_pa, c.saturation_temperature_drop_k, c.coolant_velocity_m_s, c.coolant_mass_flow_kg_s, c.coolant_outlet_temperature_k, c.mean_wall_subcooling_k, c.tube_count, c.tube_mass_kg, c.pumping_power_w, c.yearly_cost, c.bundle_width_m, c.bundle_height_m, c.notes
  ) WITH ORDINALITY AS v(outcome, limits_not_met, outside_area_m2, tube_length_m, duty_w, overall_coefficient_w_m2k, mean_coefficient_w_m2k, coolant_pressure_drop_pa, vapour_pressure_drop_pa, saturation_temperature_drop_k, coolant_velocity_m_s, coolant_mass_flow_kg_s, coolant_outlet_temperature_k, mean_wall_subcooling_k, tube_count, tube_mass_kg, pumping_power_w, yearly_cost, bundle_width_m, bundle_height_m, notes, n);
--> statement-breakpoint
COMMENT ON VIEW "run_point" IS
  'One row per stored point of a run: key results in SI, null where a point has none. Filter by run_id.';
