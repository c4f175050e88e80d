mod motion;
