mod property;
