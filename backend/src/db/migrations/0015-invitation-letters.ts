/** An invitation is written to whom it invites: a letter of its own, since nobody here is its reader yet. */
export const up = `
create table invitation_letters (
  invitation_id uuid primary key references invitations on delete cascade,
  programme_id uuid not null references programmes,
  -- The link's secret until the letter has gone; invitations themselves keep its hash alone.
  token text,
  email text not null,
  programme text not null,
  party text not null,
  invited_by text not null,
  expires_at timestamptz not null,
  message_id text not null unique default gen_random_uuid()::text,
  attempts integer not null default 0,
  next_attempt_at timestamptz not null default now(),
  settled_at timestamptz,
  last_error text,
  check ((token is null) = (settled_at is not null))
);
create index invitation_letters_due on invitation_letters (next_attempt_at) where settled_at is null;
create index invitation_letters_programme on invitation_letters (programme_id) where settled_at is null;
alter table invitation_letters enable row level security;
-- The application writes one with its invitation and reads none.
create policy invitation_letters_none on invitation_letters for select to crosstie_app using (false);
create policy invitation_letters_add on invitation_letters for insert to crosstie_app with check (
  exists (select 1 from invitations i where i.id = invitation_letters.invitation_id and i.programme_id = invitation_letters.programme_id
    and i.email = invitation_letters.email and i.expires_at = invitation_letters.expires_at));
create policy invitation_letters_worker on invitation_letters for all to crosstie_worker using (true) with check (true);
grant insert on invitation_letters to crosstie_app;
grant select, update on invitation_letters to crosstie_worker;

create or replace function access.stuck_mail(p_programme uuid) returns integer language sql stable security definer set search_path = public, pg_temp as $$
  select case when p_programme = any(access.programmes_as('programme-administrator')) then
    (select count(*)::integer from outbox where programme_id = p_programme and settled_at is null and attempts >= 3)
    + (select count(*)::integer from invitation_letters where programme_id = p_programme and settled_at is null and attempts >= 3) end
$$;
`;
