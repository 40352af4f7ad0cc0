-- As before, and: where the boot's middle belongs on these skis. Another offset is another notch for every sole.
create or replace function fitting_basis(f fittings) returns jsonb language sql stable security definer set search_path = public, pg_temp as $$
  select jsonb_build_object(
    'renter_data', (select current_inputs_id::text from renters where id = f.renter_id),
    'boots', coalesce(f.boots_id::text, 'own'),
    'sole', case when f.boots_id is not null
      then (select sole_length_mm || ' ' || sole_type from boots where id = f.boots_id)
      else (select sole_length_mm || ' ' || sole_type || ' ' || wear from own_boots where rental_id = f.rental_id
            order by recorded_at desc, id desc limit 1) end,
    'ski_pair', (select p.id || ' ' || m.offset_mm from ski_pairs p join ski_models m on m.id = p.ski_model_id where p.id = f.ski_pair_id),
    'binding_model', (select m.id || ' ' || m.content_sha256 from ski_pairs p join binding_models m on m.id = p.binding_model_id where p.id = f.ski_pair_id),
    'correction', (select string_agg(side || ' ' || toe_correction || ' ' || heel_correction, ', ' order by side) from skis where ski_pair_id = f.ski_pair_id)
  )
$$;
--> statement-breakpoint
-- Nobody's offset was part of it until now: what is open goes on with the one that it was computed with, as far as is known.
update fittings f set basis = jsonb_set(f.basis, '{ski_pair}', fitting_basis(f) -> 'ski_pair')
where f.basis ->> 'ski_pair' = f.ski_pair_id::text;
