// A review holds for what was reviewed: the hash of the members in a change, taken when it is drafted and kept with each review.
export default /* sql */ `
alter table change add column scope_sha256 text not null default repeat('0', 64) check (scope_sha256 ~ '^[0-9a-f]{64}$');
alter table change_review add column scope_sha256 text not null default repeat('0', 64) check (scope_sha256 ~ '^[0-9a-f]{64}$');
alter table change alter column scope_sha256 drop default;
alter table change_review alter column scope_sha256 drop default;
`;
