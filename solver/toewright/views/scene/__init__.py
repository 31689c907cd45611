"""The linkage as a picture knows it: named parts with colours, the same for every renderer."""
