-- Two roles that own nothing: a signed-in member sees one organisation's rows, the service sees all of them
-- (sign-in, mail, checks). Roles belong to the whole server, so another database may have made them already.
do $$
begin
  create role ebbmark_member nologin;
exception when duplicate_object or unique_violation then null;
end $$;
--> statement-breakpoint
do $$
begin
  create role ebbmark_service nologin;
exception when duplicate_object or unique_violation then null;
end $$;
--> statement-breakpoint
do $$
begin
  execute format('grant ebbmark_member, ebbmark_service to %I', current_user);
exception when others then
  -- A concurrent migration of another database granted the same membership at the same moment.
  if not pg_has_role(current_user, 'ebbmark_member', 'member') then raise; end if;
end $$;
--> statement-breakpoint
grant usage on schema public to ebbmark_member, ebbmark_service;
--> statement-breakpoint
create function ebbmark_organisation() returns uuid language sql stable as $$
  select nullif(current_setting('ebbmark.organisation', true), '')::uuid
$$;
--> statement-breakpoint
-- Row-level security on every table that has an organisation: none can be forgotten here, and a later
-- migration that adds a table repeats these lines for it.
do $$
declare tenant_table text;
begin
  for tenant_table in
    select table_name from information_schema.columns
    where table_schema = 'public' and column_name = 'organisation_id'
  loop
    execute format('alter table %I enable row level security', tenant_table);
    execute format('alter table %I force row level security', tenant_table);
    execute format(
      'create policy %I on %I for all to ebbmark_member
         using (organisation_id = ebbmark_organisation())
         with check (organisation_id = ebbmark_organisation())',
      tenant_table || '_own_organisation', tenant_table);
    execute format(
      'create policy %I on %I for all to ebbmark_service using (true) with check (true)',
      tenant_table || '_service', tenant_table);
    execute format('grant select, insert, update on %I to ebbmark_member, ebbmark_service', tenant_table);
  end loop;
end $$;
--> statement-breakpoint
alter table organisations enable row level security;
--> statement-breakpoint
alter table organisations force row level security;
--> statement-breakpoint
create policy organisations_own on organisations for all to ebbmark_member
  using (id = ebbmark_organisation()) with check (id = ebbmark_organisation());
--> statement-breakpoint
create policy organisations_service on organisations for all to ebbmark_service using (true) with check (true);
--> statement-breakpoint
grant select, update on organisations to ebbmark_member;
--> statement-breakpoint
grant select, insert, update on organisations to ebbmark_service;
--> statement-breakpoint
grant delete on person_sites to ebbmark_member, ebbmark_service;
--> statement-breakpoint
-- Facts have no update and no delete, whoever asks.
create function refuse_change() returns trigger language plpgsql as $$
begin
  raise exception 'rows of % are never changed or removed', tg_table_name
    using errcode = 'P0001', constraint = tg_name, table = tg_table_name;
end $$;
--> statement-breakpoint
create trigger movements_append_only before update or delete on movements
  for each row execute function refuse_change();
--> statement-breakpoint
create trigger movements_never_truncated before truncate on movements
  for each statement execute function refuse_change();
--> statement-breakpoint
create trigger drain_revisions_append_only before update or delete on drain_revisions
  for each row execute function refuse_change();
--> statement-breakpoint
create trigger drain_revisions_never_truncated before truncate on drain_revisions
  for each statement execute function refuse_change();
--> statement-breakpoint
create trigger documents_append_only before update or delete on documents
  for each row execute function refuse_change();
--> statement-breakpoint
create trigger documents_never_truncated before truncate on documents
  for each statement execute function refuse_change();
--> statement-breakpoint
create trigger signatures_append_only before update or delete on signatures
  for each row execute function refuse_change();
--> statement-breakpoint
create trigger signatures_never_truncated before truncate on signatures
  for each statement execute function refuse_change();
--> statement-breakpoint
create trigger audit_append_only before update or delete on audit
  for each row execute function refuse_change();
--> statement-breakpoint
create trigger audit_never_truncated before truncate on audit
  for each statement execute function refuse_change();
--> statement-breakpoint
-- A site's lines are 1, 2, 3 ... and each names the hash of the one before it. The row lock on the head of the
-- book makes two writers take turns.
create function extend_the_chain() returns trigger language plpgsql as $$
declare head books%rowtype;
begin
  select * into head from books where site_id = new.site_id for update;
  if not found or head.organisation_id <> new.organisation_id then
    raise exception 'no book is open for this site'
      using errcode = 'P0001', constraint = 'movements_have_a_book', table = 'movements';
  end if;
  if new.line_no <> head.last_line_no + 1 or new.previous_hash <> head.last_hash then
    raise exception 'line % does not follow line %', new.line_no, head.last_line_no
      using errcode = 'P0001', constraint = 'movements_extend_the_chain', table = 'movements';
  end if;
  update books set last_line_no = new.line_no, last_hash = new.hash where site_id = new.site_id;
  return new;
end $$;
--> statement-breakpoint
create trigger movements_extend_the_chain before insert on movements
  for each row execute function extend_the_chain();
--> statement-breakpoint
-- A reversal is the exact mirror of its target, once, and a reversal is not itself reversed.
create function mirror_the_target() returns trigger language plpgsql as $$
declare target movements%rowtype;
begin
  select * into target from movements where id = new.reverses;
  if not found
    or target.reason = 'reversal'
    or target.site_id <> new.site_id
    or target.stream_id <> new.stream_id
    or target.from_account_id <> new.to_account_id
    or target.to_account_id <> new.from_account_id
    or target.litres <> new.litres
    or target.kilograms <> new.kilograms
    or target.pieces <> new.pieces
    or target.occurred_on <> new.occurred_on
    or target.counts_as <> new.counts_as
  then
    raise exception 'a reversal mirrors its target exactly'
      using errcode = 'P0001', constraint = 'movements_mirror_their_target', table = 'movements';
  end if;
  return new;
end $$;
--> statement-breakpoint
create trigger movements_mirror_their_target before insert on movements
  for each row when (new.reverses is not null) execute function mirror_the_target();
--> statement-breakpoint
-- Balances are what the movements say, because only the movements' own trigger moves them.
create function move_the_balances() returns trigger language plpgsql as $$
begin
  insert into balances as held (account_id, stream_id, organisation_id, site_id, litres, kilograms, pieces, version)
  values
    (new.from_account_id, new.stream_id, new.organisation_id, new.site_id, -new.litres, -new.kilograms, -new.pieces, 1),
    (new.to_account_id, new.stream_id, new.organisation_id, new.site_id, new.litres, new.kilograms, new.pieces, 1)
  on conflict (account_id, stream_id) do update set
    litres = held.litres + excluded.litres,
    kilograms = held.kilograms + excluded.kilograms,
    pieces = held.pieces + excluded.pieces,
    version = held.version + 1;
  return null;
end $$;
--> statement-breakpoint
create trigger movements_move_the_balances after insert on movements
  for each row execute function move_the_balances();
--> statement-breakpoint
create function refuse_by_hand() returns trigger language plpgsql as $$
begin
  -- Depth 1 is this trigger itself: the change came from a statement, not from a movement's trigger.
  if pg_trigger_depth() < 2 then
    raise exception '% is kept by the movements alone', tg_table_name
      using errcode = 'P0001', constraint = tg_name, table = tg_table_name;
  end if;
  if tg_op = 'DELETE' then return old; end if;
  return new;
end $$;
--> statement-breakpoint
create trigger balances_only_by_movements before insert or update or delete on balances
  for each row execute function refuse_by_hand();
--> statement-breakpoint
create trigger books_only_by_movements before update or delete on books
  for each row execute function refuse_by_hand();
--> statement-breakpoint
create trigger balances_never_truncated before truncate on balances
  for each statement execute function refuse_change();
--> statement-breakpoint
create trigger books_never_truncated before truncate on books
  for each statement execute function refuse_change();
--> statement-breakpoint
-- A new book starts at line 0 with the agreed first hash (64 zeros), never in the middle.
alter table books add constraint books_start_at_zero
  check (last_line_no > 0 or last_hash = repeat('0', 64));
--> statement-breakpoint
-- What an issued manifest says does not change: its number, once given, stays.
create function keep_the_number() returns trigger language plpgsql as $$
begin
  if old.number is not null and new.number is distinct from old.number then
    raise exception 'an issued number stays'
      using errcode = 'P0001', constraint = 'pickups_keep_their_number', table = 'pickups';
  end if;
  return new;
end $$;
--> statement-breakpoint
create trigger pickups_keep_their_number before update on pickups
  for each row execute function keep_the_number();
--> statement-breakpoint
alter table pickups add constraint pickups_number_on_issue
  check ((number is not null) = (issued_at is not null));
--> statement-breakpoint
create unique index holds_one_open on holds (container_id) where released_at is null;
--> statement-breakpoint
create unique index flags_one_per_period on flags (rule_id, period_key) where state <> 'withdrawn';
