import type { Issue } from '#shared/api/issues';
import { counted } from '../../lib/units.js';
import { useFollow, useUnfollow } from './api/follow.js';

export function FollowButton({ issue }: { issue: Issue }) {
  const name = { programme: issue.programme.code, number: issue.number };
  const follow = useFollow(name);
  const unfollow = useUnfollow(name);
  const change = issue.following ? unfollow : follow;
  return (
    <button type="button" className="text-button" aria-pressed={issue.following} disabled={change.isPending} onClick={() => change.mutate()}>
      {issue.following ? 'Following' : 'Follow'}<span> · {counted(issue.followers, 'follower')}</span>
    </button>
  );
}
