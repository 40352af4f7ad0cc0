-- Who says a body value may be told better later (the renter's word is measured and stands); the value may not change.
grant update (mass_source, mass_by, height_source, height_by) on fitting_inputs to notchwise_app;
