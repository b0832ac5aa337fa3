import type { Feed } from '../ports.ts';

/** One feed that tells all that were added; they come up after the core that speaks to them. */
export const createBroadcast = (): { feed: Feed; add: (feed: Feed) => void } => {
  const feeds: Feed[] = [];
  return {
    add: (feed) => feeds.push(feed),
    feed: {
      live: (values) => feeds.forEach((feed) => feed.live(values)),
      alarms: (list) => feeds.forEach((feed) => feed.alarms(list)),
      nodes: (nodes) => feeds.forEach((feed) => feed.nodes(nodes)),
      limits: (channel, limits) => feeds.forEach((feed) => feed.limits(channel, limits)),
      health: (health) => feeds.forEach((feed) => feed.health(health)),
      revision: (revision) => feeds.forEach((feed) => feed.revision(revision)),
    },
  };
};
