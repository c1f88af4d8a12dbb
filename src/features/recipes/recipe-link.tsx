import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import { paths } from '../../lib/paths.ts';
import { recipesReading } from './queries.ts';

/** A link to another recipe by its number and title, once the list is known; prints as its number. */
export function RecipeLink({ slug, version }: { slug: string; version: number | undefined }) {
  const recipes = useQuery(recipesReading);
  const row = recipes.data?.recipes.find((one) => one.slug === slug);
  return (
    <Link to={paths.recipe(slug, version)}>
      {row ? `${row.number} ${row.title}` : slug.replaceAll('-', ' ')}
      {version !== undefined && `, version ${version}`}
    </Link>
  );
}
