// Where the sun stands, by place and time. Pure functions; Node loads this file too.
// Source: Michalsky J. J. 1988, The Astronomical Almanac's algorithm for approximate solar position (1950-2050), Solar
// Energy 40, 227-235, doi:10.1016/0038-092X(88)90045-X; to 0.01° from 1950 to 2050.
"use strict";

const readerSun = (() => {
  const DEGREE = Math.PI / 180;
  const HORIZONTAL_PARALLAX_DEG = 8.794 / 3600; // IAU 1976, of the sun at its mean distance
  const J2000_MS = Date.UTC(2000, 0, 1, 12);
  const MS_A_DAY = 86400000;
  const FIRST_YEAR = 1950;
  const LAST_YEAR = 2050;

  const turned = (degrees) => ((degrees % 360) + 360) % 360;

  // Milliseconds of universal time from "2003-10-17", "12:30" or "12:30:30" and hours east of Greenwich; NaN for what
  // is no date or time, or a year outside 1950 to 2050.
  const universalTime = (date, time, offsetHours) => {
    const day = /^(\d{4})-(\d\d)-(\d\d)$/.exec(date);
    const clock = /^(\d\d):(\d\d)(?::(\d\d))?$/.exec(time);
    if (!day || !clock || !(Math.abs(offsetHours) <= 14)) {
      return NaN;
    }
    const [year, month, dayOfMonth] = day.slice(1).map(Number);
    const [hour, minute, second = 0] = clock.slice(1).filter(Boolean).map(Number);
    const midnight = new Date(Date.UTC(year, month - 1, dayOfMonth));
    const real = midnight.getUTCMonth() === month - 1 && hour < 24 && minute < 60 && second < 60;
    const covered = year >= FIRST_YEAR && year <= LAST_YEAR;
    return real && covered ? midnight.getTime() + ((hour - offsetHours) * 60 + minute) * 60000 + second * 1000 : NaN;
  };

  // Geometric elevation and azimuth [°], clockwise from north, of the sun's centre as an observer at this latitude and
  // longitude [°, north and east positive] has it at `time` [ms of universal time]; without refraction.
  const sunPosition = (time, latitude, longitude) => {
    const days = (time - J2000_MS) / MS_A_DAY;
    const meanLongitude = 280.46 + 0.9856474 * days;
    const anomaly = (357.528 + 0.9856003 * days) * DEGREE;
    const ecliptic = (meanLongitude + 1.915 * Math.sin(anomaly) + 0.02 * Math.sin(2 * anomaly)) * DEGREE;
    const obliquity = (23.439 - 0.0000004 * days) * DEGREE;
    const ascension = Math.atan2(Math.cos(obliquity) * Math.sin(ecliptic), Math.cos(ecliptic));
    const declination = Math.asin(Math.sin(obliquity) * Math.sin(ecliptic));
    const hours = ((time % MS_A_DAY) + MS_A_DAY) % MS_A_DAY / 3600000;
    const sidereal = 15 * (6.697375 + 0.0657098242 * days + hours) + longitude;
    const hourAngle = sidereal * DEGREE - ascension;
    const north = latitude * DEGREE;
    const up = Math.sin(declination) * Math.sin(north) + Math.cos(declination) * Math.cos(north) * Math.cos(hourAngle);
    const east = -Math.cos(declination) * Math.sin(hourAngle);
    const toNorth = Math.sin(declination) * Math.cos(north) - Math.cos(declination) * Math.sin(north) * Math.cos(hourAngle);
    const elevation = Math.atan2(up, Math.hypot(east, toNorth)) / DEGREE;
    return {
      elevation: elevation - HORIZONTAL_PARALLAX_DEG * Math.cos(elevation * DEGREE),
      azimuth: turned(Math.atan2(east, toNorth) / DEGREE),
    };
  };

  return { sunPosition, universalTime };
})();

if (typeof module !== "undefined") {
  module.exports = readerSun;
}
