import type { Step } from './names.js';

/** Structures of the uplink in the three vocabularies (compact names). */
const UPLINK = /^(uplink|ul|uplinkconfig.*|supplementaryuplink.*|frequencyinfoul.*|initialuplinkbwp.*|uplinkbwp.*|lowlevelrx.*|rxarraycarriers.*|rxendpoints?|ulcarrier.*|uplinkcarrier.*)$/;

/** Structures that speak of other cells, other channels or capabilities, not of this carrier. */
const ELSEWHERE = new RegExp([
  '^neigh', 'neigh(bour|bor)?(ing)?(cell|list)', '^meas(object|config|timing|gap)', '^(intra|inter)freq', '^smtc', '^rach', '^prach', '^msga', '^msg1',
  '^sidelink', '^sl(config|bwp|freq)', '^ratematch', '^lte(crs|neigh)', '^static(lowlevel)', '^supportedframe', 'capabilit', '^endpointtypes',
  '^csirs', '^srs(config|resource)', '^coreset', '^controlresourceset', '^searchspace', '^candidate', '^bandwidthscsdelaystate$',
].join('|'));

export const isUplink = (steps: readonly Step[]): boolean => steps.slice(0, -1).some((s) => UPLINK.test(s.compact));

export const isElsewhere = (steps: readonly Step[]): boolean => steps.slice(0, -1).some((s) => ELSEWHERE.test(s.compact));
