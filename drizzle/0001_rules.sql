-- The rules that the database holds by itself. Refusals carry their own SQLSTATE (class NW):
--   NW001 the item is in another state, or the edge does not exist (detail: the state it is in)
--   NW002 the item is held in quarantine
--   NW003 something that a fitting was computed from changed (detail: what, comma separated)
--   NW004 the binding model's sheet is not approved, or the model is blocked
--   NW005 the fitting is not in the state that this needs
--   NW006 the ski's preset was changed by somebody else meanwhile
--   NW007 an erasure waits for the end of a hold
--   NW008 an item and its fitting do not agree
--   NW009 a fact is added, never changed

insert into lifecycle_edges (from_state, to_state) values
  ('commissioning', 'racked'),
  ('commissioning', 'quarantine'),
  ('racked', 'claimed'),
  ('racked', 'unchecked'),
  ('racked', 'service'),
  ('racked', 'under_test'),
  ('racked', 'retired'),
  ('racked', 'sold'),
  ('racked', 'quarantine'),
  ('claimed', 'prepared'),
  ('claimed', 'racked'),
  ('claimed', 'unchecked'),
  ('claimed', 'service'),
  ('claimed', 'quarantine'),
  ('prepared', 'out'),
  ('prepared', 'racked'),
  ('prepared', 'unchecked'),
  ('prepared', 'service'),
  ('prepared', 'quarantine'),
  ('out', 'unchecked'),
  ('out', 'lost'),
  ('out', 'quarantine'),
  ('unchecked', 'racked'),
  ('unchecked', 'service'),
  ('unchecked', 'withdrawn'),
  ('unchecked', 'quarantine'),
  ('service', 'unchecked'),
  ('service', 'quarantine'),
  ('withdrawn', 'service'),
  ('withdrawn', 'retired'),
  ('withdrawn', 'sold'),
  ('withdrawn', 'quarantine'),
  ('under_test', 'racked'),
  ('under_test', 'service'),
  ('under_test', 'quarantine'),
  ('lost', 'unchecked'),
  ('lost', 'quarantine'),
  ('quarantine', 'unchecked'),
  ('quarantine', 'service'),
  ('quarantine', 'retired'),
  ('retired', 'quarantine'),
  ('sold', 'quarantine');
--> statement-breakpoint
alter table ski_pairs add constraint ski_pairs_code_form check (code ~ '^S[0-9]{1,5}$');
--> statement-breakpoint
alter table boots add constraint boots_code_form check (code ~ '^B[0-9]{1,5}$');
--> statement-breakpoint
alter table boots add constraint boots_sole check (sole_length_mm between 150 and 400);
--> statement-breakpoint
alter table own_boots add constraint own_boots_sole check (sole_length_mm between 150 and 400);
--> statement-breakpoint
alter table own_boots add constraint own_boots_second_look check (second_look_by is null or second_look_by <> judged_by);
--> statement-breakpoint
alter table skis add constraint skis_side check (side in ('left', 'right'));
--> statement-breakpoint
alter table fitting_inputs add constraint fitting_inputs_request check (request = 0 or (request in (-1, 1) and request_signature is not null and request_signed_name is not null));
--> statement-breakpoint
alter table fitting_inputs add constraint fitting_inputs_type check (skier_type in ('I-', 'I', 'II', 'III', 'III+'));
--> statement-breakpoint
alter table fitting_inputs add constraint fitting_inputs_measured check ((mass_source = 'measured') = (mass_by is not null) and (height_source = 'measured') = (height_by is not null));
--> statement-breakpoint
alter table rentals add constraint rentals_state check (state in ('form', 'waiting', 'open', 'out', 'returned', 'cancelled'));
--> statement-breakpoint
alter table rentals add constraint rentals_period check (ends_on >= starts_on);
--> statement-breakpoint
alter table fittings add constraint fittings_state check (state in ('claimed', 'prepared', 'handed_over', 'void', 'given_back'));
--> statement-breakpoint
alter table fittings add constraint fittings_one_pair_of_boots check ((boots_id is null) <> (own_boots_id is null));
--> statement-breakpoint
alter table fittings add constraint fittings_prepared check (state not in ('prepared', 'handed_over') or record_id is not null);
--> statement-breakpoint
alter table fitting_decisions add constraint fitting_decisions_rows check (rows is null or rows between -2 and 2);
--> statement-breakpoint
alter table fitting_decisions add constraint fitting_decisions_second check (second_person_id is null or second_person_id <> person_id);
--> statement-breakpoint
alter table memberships add constraint memberships_roles check (cardinality(roles) > 0 and roles <@ array['manager', 'head_technician', 'technician', 'counter']);
--> statement-breakpoint
alter table renters add constraint renters_current_inputs foreign key (current_inputs_id) references fitting_inputs (id) on delete set null;
--> statement-breakpoint
alter table fittings add constraint fittings_record foreign key (record_id) references fitting_records (id);
--> statement-breakpoint

-- One state per item: the change is the fact, the item's columns are its projection.
create function project_state_change() returns trigger language plpgsql security definer set search_path = public, pg_temp as $$
declare
  now_in text;
  last record;
begin
  if new.item_kind = 'ski_pair' then
    select state into now_in from ski_pairs where id = new.item_id and shop_id = new.shop_id for update;
  elsif new.item_kind = 'boots' then
    select state into now_in from boots where id = new.item_id and shop_id = new.shop_id for update;
  end if;
  if now_in is null then
    raise exception 'no such item in this shop' using errcode = 'NW001', detail = 'unknown';
  end if;
  if now_in <> new.from_state then
    raise exception 'the item is %', now_in using errcode = 'NW001', detail = now_in;
  end if;

  select * into last from state_changes where item_id = new.item_id order by item_seq desc limit 1;
  new.item_seq := coalesce(last.item_seq, 0) + 1;

  if new.undoes_id is null then
    if not exists (select from lifecycle_edges where from_state = new.from_state and to_state = new.to_state) then
      raise exception 'no way from % to %', new.from_state, new.to_state using errcode = 'NW001', detail = now_in;
    end if;
    perform guard_state_change(new);
  else
    -- An undo goes back along the item's latest change, in time, and only once.
    if last.id is distinct from new.undoes_id or last.undoes_id is not null
       or last.from_state <> new.to_state or last.to_state <> new.from_state
       or last.to_state in ('claimed', 'prepared', 'out', 'quarantine') or last.from_state in ('claimed', 'prepared', 'quarantine')
       or last.recorded_at < now() - (case when last.to_state in ('retired', 'sold') then interval '24 hours' else interval '60 seconds' end)
    then
      raise exception 'this change can no longer be taken back' using errcode = 'NW001', detail = now_in;
    end if;
  end if;

  if new.item_kind = 'ski_pair' then
    update ski_pairs set state = new.to_state, state_since = new.occurred_at, site_id = new.site_id,
      rack_place = coalesce(new.rack_place, rack_place), version = version + 1 where id = new.item_id;
  else
    update boots set state = new.to_state, state_since = new.occurred_at, site_id = new.site_id,
      rack_place = coalesce(new.rack_place, rack_place), version = version + 1 where id = new.item_id;
  end if;
  return new;
end $$;
--> statement-breakpoint
create function guard_state_change(change state_changes) returns void language plpgsql security definer set search_path = public, pg_temp as $$
begin
  if change.to_state in ('claimed', 'prepared') and not exists (
    select from fittings f where f.id = change.subject_id and f.state = change.to_state
      and change.item_id in (f.ski_pair_id, f.boots_id)
  ) then
    raise exception 'no fitting takes this item' using errcode = 'NW008';
  end if;
  if change.to_state = 'out' and not exists (
    select from hand_overs h join fittings f on f.id = h.fitting_id
    where h.fitting_id = change.subject_id and change.item_id in (f.ski_pair_id, f.boots_id)
  ) then
    raise exception 'nothing goes out without a hand-over' using errcode = 'NW008';
  end if;
  if change.from_state = 'unchecked' and change.to_state = 'racked' and not exists (
    select from inspections i where i.id = change.subject_id and i.item_id = change.item_id and i.verdict = 'rack'
  ) then
    raise exception 'nothing is racked unchecked' using errcode = 'NW001', detail = 'unchecked';
  end if;
  if change.to_state = 'racked' and change.from_state not in ('claimed', 'prepared') and exists (
    select from rental_items r where r.item_id = change.item_id and r.back_at is null
  ) then
    raise exception 'a part of it is still with a renter' using errcode = 'NW001', detail = 'missing';
  end if;
  if change.item_kind = 'ski_pair' and change.to_state in ('racked', 'claimed') and change.from_state not in ('claimed', 'prepared')
     and not binding_model_approved((select binding_model_id from ski_pairs where id = change.item_id)) then
    raise exception 'the binding model is not approved' using errcode = 'NW004';
  end if;
  if change.to_state = 'quarantine' and not exists (
    select from quarantines q where q.id = change.subject_id and q.item_id = change.item_id and q.released_at is null
  ) then
    raise exception 'a hold needs its reason, owner and review date' using errcode = 'NW002';
  end if;
  if change.from_state = 'quarantine' and not exists (
    select from quarantines q where q.id = change.subject_id and q.item_id = change.item_id
      and q.released_at is not null and q.released_to = change.to_state
  ) then
    raise exception 'the item is held' using errcode = 'NW002';
  end if;
end $$;
--> statement-breakpoint
create function binding_model_approved(model uuid) returns boolean language sql stable security definer set search_path = public, pg_temp as $$
  select exists (
    select from binding_models m join binding_model_approvals a on a.binding_model_id = m.id and a.content_sha256 = m.content_sha256
    where m.id = model and m.blocked_at is null
  )
$$;
--> statement-breakpoint
create trigger state_changes_project before insert on state_changes for each row execute function project_state_change();
--> statement-breakpoint

-- Where a unit stands, and its correction: again the change is the fact.
create function project_preset_change() returns trigger language plpgsql security definer set search_path = public, pg_temp as $$
begin
  update skis set preset_toe = new.preset_toe, preset_heel = new.preset_heel, preset_turns = new.preset_turns,
    toe_correction = new.toe_correction, heel_correction = new.heel_correction,
    preset_read_at = new.occurred_at, preset_version = new.preset_version
  where id = new.ski_id and shop_id = new.shop_id and preset_version = new.preset_version - 1;
  if not found then
    raise exception 'the preset was changed meanwhile' using errcode = 'NW006';
  end if;
  return new;
end $$;
--> statement-breakpoint
create trigger preset_changes_project before insert on preset_changes for each row execute function project_preset_change();
--> statement-breakpoint

-- Nothing in quarantine is edited.
create function refuse_edit_in_quarantine() returns trigger language plpgsql set search_path = public, pg_temp as $$
declare
  held boolean;
begin
  if tg_table_name = 'skis' then
    select state = 'quarantine' into held from ski_pairs where id = old.ski_pair_id;
  else
    held := old.state = 'quarantine' and new.state = 'quarantine';
  end if;
  if held then
    raise exception 'the item is held' using errcode = 'NW002';
  end if;
  return new;
end $$;
--> statement-breakpoint
create trigger ski_pairs_held before update on ski_pairs for each row execute function refuse_edit_in_quarantine();
--> statement-breakpoint
create trigger boots_held before update on boots for each row execute function refuse_edit_in_quarantine();
--> statement-breakpoint
create trigger skis_held before update on skis for each row execute function refuse_edit_in_quarantine();
--> statement-breakpoint

-- What an approval of a binding model vouches for, as one hash.
create function hash_binding_model() returns trigger language plpgsql set search_path = public, pg_temp as $$
begin
  new.content_sha256 := encode(sha256(convert_to(jsonb_build_array(
    new.track, to_jsonb(new.accepts), to_jsonb(new.refuses), new.brake_mm, new.manual_document, new.manual_edition,
    new.manual_page, new.window_note, encode(sha256(coalesce(new.window_picture, ''::bytea)), 'hex'))::text, 'UTF8')), 'hex');
  return new;
end $$;
--> statement-breakpoint
create trigger binding_models_hash before insert or update on binding_models for each row execute function hash_binding_model();
--> statement-breakpoint
create function refuse_empty_approval() returns trigger language plpgsql security definer set search_path = public, pg_temp as $$
begin
  if not exists (
    select from binding_models m where m.id = new.binding_model_id and m.shop_id = new.shop_id and m.content_sha256 = new.content_sha256
      and m.manual_document <> '' and m.manual_edition <> '' and m.manual_page <> '' and m.window_note <> '' and m.window_picture is not null
  ) then
    raise exception 'an approval needs manual, page and window picture, as they now stand' using errcode = 'NW004';
  end if;
  return new;
end $$;
--> statement-breakpoint
create trigger binding_model_approvals_guard before insert on binding_model_approvals for each row execute function refuse_empty_approval();
--> statement-breakpoint

-- What a fitting is computed from. A changed e-mail is not in it.
create function fitting_basis(f fittings) returns jsonb language sql stable security definer set search_path = public, pg_temp as $$
  select jsonb_build_object(
    'renter_data', (select current_inputs_id::text from renters where id = f.renter_id),
    'boots', coalesce(f.boots_id::text, 'own'),
    'sole', case when f.boots_id is not null
      then (select sole_length_mm || ' ' || sole_type from boots where id = f.boots_id)
      else (select sole_length_mm || ' ' || sole_type || ' ' || wear from own_boots where rental_id = f.rental_id
            order by recorded_at desc, id desc limit 1) end,
    'ski_pair', f.ski_pair_id::text,
    'binding_model', (select m.id || ' ' || m.content_sha256 from ski_pairs p join binding_models m on m.id = p.binding_model_id where p.id = f.ski_pair_id),
    'correction', (select string_agg(side || ' ' || toe_correction || ' ' || heel_correction, ', ' order by side) from skis where ski_pair_id = f.ski_pair_id)
  )
$$;
--> statement-breakpoint
create function changed_since(f fittings) returns text[] language sql stable security definer set search_path = public, pg_temp as $$
  select coalesce(array_agg(key order by key), '{}') from jsonb_each_text(fitting_basis(f)) now_is(key, value)
  where value is distinct from f.basis ->> key
$$;
--> statement-breakpoint
create function write_fitting_basis() returns trigger language plpgsql security definer set search_path = public, pg_temp as $$
begin
  if new.inputs_id is distinct from (select current_inputs_id from renters where id = new.renter_id) then
    raise exception 'these are not the renter''s current inputs' using errcode = 'NW003', detail = 'renter_data';
  end if;
  if new.shop_id is distinct from (select shop_id from rentals where id = new.rental_id and renter_id = new.renter_id)
     or new.shop_id is distinct from (select shop_id from ski_pairs where id = new.ski_pair_id)
     or (new.boots_id is not null and new.shop_id is distinct from (select shop_id from boots where id = new.boots_id)) then
    raise exception 'renter, rental and items are of one shop' using errcode = 'NW008';
  end if;
  new.basis := fitting_basis(new);
  new.inputs_hash := encode(sha256(convert_to(new.basis::text, 'UTF8')), 'hex');
  return new;
end $$;
--> statement-breakpoint
create trigger fittings_basis before insert on fittings for each row execute function write_fitting_basis();
--> statement-breakpoint
create function guard_fitting_update() returns trigger language plpgsql set search_path = public, pg_temp as $$
begin
  if old.state <> new.state and not (
    (old.state = 'claimed' and new.state in ('prepared', 'void', 'given_back'))
    or (old.state = 'prepared' and new.state in ('handed_over', 'void', 'given_back'))
  ) then
    raise exception 'a fitting that is % does not become %', old.state, new.state using errcode = 'NW005', detail = old.state;
  end if;
  if new.state = 'prepared' and not exists (select from fitting_records r where r.id = new.record_id and r.fitting_id = new.id) then
    raise exception 'prepared means that its record is signed' using errcode = 'NW005', detail = old.state;
  end if;
  if new.state = 'handed_over' and not exists (select from hand_overs h where h.fitting_id = new.id) then
    raise exception 'handed over means that the renter signed' using errcode = 'NW005', detail = old.state;
  end if;
  return new;
end $$;
--> statement-breakpoint
create trigger fittings_states before update on fittings for each row execute function guard_fitting_update();
--> statement-breakpoint
create function guard_record() returns trigger language plpgsql security definer set search_path = public, pg_temp as $$
declare
  f fittings;
  changed text[];
begin
  if new.corrects_id is not null then
    return new;
  end if;
  select * into f from fittings where id = new.fitting_id for update;
  if f.state <> 'claimed' then
    raise exception 'the fitting is %', f.state using errcode = 'NW005', detail = f.state;
  end if;
  changed := changed_since(f);
  if changed <> '{}' then
    raise exception 'changed since it was computed' using errcode = 'NW003', detail = array_to_string(changed, ',');
  end if;
  return new;
end $$;
--> statement-breakpoint
create trigger fitting_records_guard before insert on fitting_records for each row execute function guard_record();
--> statement-breakpoint
create function guard_hand_over() returns trigger language plpgsql security definer set search_path = public, pg_temp as $$
declare
  f fittings;
  changed text[];
begin
  select * into f from fittings where id = new.fitting_id and shop_id = new.shop_id for update;
  if f.state is distinct from 'prepared' or f.record_id is distinct from new.record_id then
    raise exception 'the fitting is %', f.state using errcode = 'NW005', detail = f.state;
  end if;
  changed := changed_since(f);
  if exists (select from fitting_record_parts p join skis s on s.id = p.ski_id where p.record_id = new.record_id and s.preset_version <> p.preset_version) then
    changed := changed || 'preset'::text;
  end if;
  if exists (select from fitting_records c where c.corrects_id = new.record_id) then
    changed := changed || 'record'::text;
  end if;
  if changed <> '{}' then
    raise exception 'changed since it was signed' using errcode = 'NW003', detail = array_to_string(changed, ',');
  end if;
  return new;
end $$;
--> statement-breakpoint
create trigger hand_overs_guard before insert on hand_overs for each row execute function guard_hand_over();
--> statement-breakpoint

-- At commit an item that is claimed or prepared has exactly one open fitting in that state, and no other has any.
create function check_item_and_fitting() returns trigger language plpgsql security definer set search_path = public, pg_temp as $$
declare
  item uuid;
  items uuid[];
  item_state text;
  fitting_state text;
begin
  if tg_table_name = 'state_changes' then
    items := array[new.item_id];
  else
    items := array_remove(array[new.ski_pair_id, new.boots_id], null);
  end if;
  foreach item in array items loop
    select state into item_state from (select id, state from ski_pairs union all select id, state from boots) i where i.id = item;
    select f.state into fitting_state from fittings f where item in (f.ski_pair_id, f.boots_id) and f.state in ('claimed', 'prepared');
    if (case when item_state in ('claimed', 'prepared') then item_state end) is distinct from fitting_state then
      raise exception 'item % is % and its open fitting is %', item, item_state, coalesce(fitting_state, 'none') using errcode = 'NW008';
    end if;
  end loop;
  return null;
end $$;
--> statement-breakpoint
create constraint trigger state_changes_agree after insert on state_changes deferrable initially deferred for each row execute function check_item_and_fitting();
--> statement-breakpoint
create constraint trigger fittings_agree after insert or update of state on fittings deferrable initially deferred for each row execute function check_item_and_fitting();
--> statement-breakpoint

-- Facts are added, never changed or deleted, by whatever role.
create function refuse_change() returns trigger language plpgsql as $$
begin
  raise exception '% are added, never changed', tg_table_name using errcode = 'NW009';
end $$;
--> statement-breakpoint
do $$
declare
  fact text;
begin
  foreach fact in array array['state_changes', 'preset_changes', 'fitting_records', 'fitting_record_parts', 'hand_overs', 'returns',
    'inspections', 'fitting_decisions', 'ticket_holds', 'ski_readings', 'call_back_steps', 'table_approvals',
    'binding_model_approvals', 'office_changes', 'erasures'] loop
    execute format('create trigger %I before update or delete on %I for each row execute function refuse_change()', fact || '_kept', fact);
    execute format('create trigger %I before truncate on %I for each statement execute function refuse_change()', fact || '_whole', fact);
  end loop;
end $$;
--> statement-breakpoint

-- Erasing is deleting values and salt, and logging that. Records keep their commitment.
create function erase_renter(renter uuid, why text, person uuid) returns integer language plpgsql security definer set search_path = public, pg_temp as $$
declare
  erased integer;
  shop uuid;
begin
  select shop_id into shop from renters where id = renter for update;
  if shop is null then
    return 0;
  end if;
  if exists (
    select from quarantines q join fittings f on q.item_id in (f.ski_pair_id, f.boots_id)
    where f.renter_id = renter and q.released_at is null
  ) then
    raise exception 'a hold keeps this person''s data' using errcode = 'NW007';
  end if;
  delete from signatures where renter_id = renter;
  delete from fitting_inputs where renter_id = renter;
  get diagnostics erased = row_count;
  update form_links set draft = null where rental_id in (select id from rentals where renter_id = renter);
  update rentals set shoe = null, wishes = '' where renter_id = renter;
  update renters set first_name = '', last_name = '', email = null, phone = null, birth_date = null, guardian_name = null,
    guardian_relation = null, guardian_phone = null, current_inputs_id = null, version = version + 1 where id = renter;
  insert into erasures (shop_id, renter_id, reason, person_id, inputs_erased) values (shop, renter, why, person, erased);
  return erased;
end $$;
--> statement-breakpoint
grant usage, create on schema public to notchwise_eraser;
--> statement-breakpoint
grant select on quarantines, fittings, rentals, renters, fitting_inputs, signatures, form_links, erasures to notchwise_eraser;
--> statement-breakpoint
grant update on renters, form_links, rentals to notchwise_eraser;
--> statement-breakpoint
grant update (inputs_id) on fittings to notchwise_eraser;
--> statement-breakpoint
grant delete on signatures, fitting_inputs to notchwise_eraser;
--> statement-breakpoint
grant insert on erasures to notchwise_eraser;
--> statement-breakpoint
alter function erase_renter(uuid, text, uuid) owner to notchwise_eraser;
--> statement-breakpoint
revoke create on schema public from notchwise_eraser;
--> statement-breakpoint
revoke all on function erase_renter(uuid, text, uuid) from public;
--> statement-breakpoint
grant execute on function erase_renter(uuid, text, uuid) to notchwise_app;
--> statement-breakpoint

-- The server's own role: reads all, adds facts, changes only what is a projection or a setting.
grant usage on schema public to notchwise_app;
--> statement-breakpoint
grant select on all tables in schema public to notchwise_app;
--> statement-breakpoint
grant insert on shops, shop_sequences, sites, shop_texts, table_approvals, day_numbers, command_log, board_events, setup_codes, session,
  people, memberships, devices, office_changes, ski_models, binding_models, binding_model_approvals, ski_pairs, skis, boots, labels,
  state_changes, preset_changes, renters, fitting_inputs, rentals, door_links, form_links, own_boots, rental_items, fittings,
  fitting_decisions, ticket_holds, ski_readings, fitting_records, fitting_record_parts, hand_overs, signatures, returns, inspections,
  quarantines, call_backs, call_back_steps to notchwise_app;
--> statement-breakpoint
grant update on shops, shop_sequences, sites, day_numbers, setup_codes, session, people, memberships, devices, ski_models, binding_models,
  renters, rentals, door_links, form_links to notchwise_app;
--> statement-breakpoint
grant update (reviewed_by, reviewed_at) on shop_texts to notchwise_app;
--> statement-breakpoint
grant update (status, result, seq) on command_log to notchwise_app;
--> statement-breakpoint
grant update (code, home_site_id, rack_place, ski_model_id, binding_model_id, length_cm, season, version) on ski_pairs to notchwise_app;
--> statement-breakpoint
grant update (code, home_site_id, rack_place, model, mondo, sole_length_mm, sole_type, season, version) on boots to notchwise_app;
--> statement-breakpoint
grant update (until) on labels to notchwise_app;
--> statement-breakpoint
grant update (back_at, return_id) on rental_items to notchwise_app;
--> statement-breakpoint
grant update (state, held_by, held_device_id, held_since, record_id, prepared_at, ended_at, end_reason, promised_at) on fittings to notchwise_app;
--> statement-breakpoint
grant update (owner_id, review_on, released_by, released_at, released_to, release_reason) on quarantines to notchwise_app;
--> statement-breakpoint
grant update (last_step, last_step_at, closed_at, step_count) on call_backs to notchwise_app;
--> statement-breakpoint
grant delete on session, command_log, board_events to notchwise_app;
