mod pad;
