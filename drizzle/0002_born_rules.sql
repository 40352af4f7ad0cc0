-- What a thing is when it is born, for the server's own role: in commissioning, read by nobody, a fitting claimed.
-- Everything after that is a fact that is projected. One more SQLSTATE:
--   NW010 only a fact writes this
create function refuse_born_elsewhere() returns trigger language plpgsql set search_path = public, pg_temp as $$
declare
  born jsonb := to_jsonb(new);
  expected jsonb;
begin
  if current_user <> 'notchwise_app' then
    return new;
  end if;
  expected := case tg_table_name
    when 'fittings' then '{"state": "claimed", "record_id": null, "prepared_at": null, "ended_at": null}'::jsonb
    when 'skis' then '{"preset_toe": null, "preset_heel": null, "preset_turns": null, "preset_read_at": null, "preset_version": 0, "toe_correction": 0, "heel_correction": 0}'::jsonb
    else '{"state": "commissioning"}'::jsonb
  end;
  if not born @> expected then
    raise exception 'only a fact writes this' using errcode = 'NW010';
  end if;
  return new;
end $$;
--> statement-breakpoint
create trigger ski_pairs_born before insert on ski_pairs for each row execute function refuse_born_elsewhere();
--> statement-breakpoint
create trigger boots_born before insert on boots for each row execute function refuse_born_elsewhere();
--> statement-breakpoint
create trigger skis_born before insert on skis for each row execute function refuse_born_elsewhere();
--> statement-breakpoint
create trigger fittings_born before insert on fittings for each row execute function refuse_born_elsewhere();
--> statement-breakpoint

-- A label of a held item is part of what is held.
create function refuse_label_in_quarantine() returns trigger language plpgsql set search_path = public, pg_temp as $$
begin
  if exists (
    select from (select id, state from ski_pairs union all select id, state from boots) i
    where i.id = new.item_id and i.state = 'quarantine'
  ) then
    raise exception 'the item is held' using errcode = 'NW002';
  end if;
  return new;
end $$;
--> statement-breakpoint
create trigger labels_held before insert or update on labels for each row execute function refuse_label_in_quarantine();
--> statement-breakpoint

-- As before, and: an inspection racks an item once, and a release that is over opens no later hold.
create or replace function guard_state_change(change state_changes) returns void language plpgsql security definer set search_path = public, pg_temp as $$
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
      and not exists (select from state_changes s where s.subject_id = i.id)
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
  if change.from_state = 'quarantine' and (
    exists (select from quarantines q where q.item_id = change.item_id and q.released_at is null)
    or not exists (
      select from quarantines q where q.id = change.subject_id and q.item_id = change.item_id
        and q.released_at is not null and q.released_to = change.to_state
    )
  ) then
    raise exception 'the item is held' using errcode = 'NW002';
  end if;
end $$;
