// A paper that is signed keeps what it says is agreed, as the exact text whose hash is signed.
export default /* sql */ `
alter table document add column effect text, add column effect_hash text;
alter table document add constraint effect_as_hashed
  check ((effect is null) = (effect_hash is null) and (effect is null or effect_hash = encode(sha256(convert_to(effect, 'UTF8')), 'hex')));
`;
