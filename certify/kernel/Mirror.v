(** * Mirrors: only the first of all images of a cycle has to be excluded

    A mirror is a permutation [p] of the vertices that maps edges to edges and needed edges
    onto needed ones. It takes a Hamiltonian cycle to another one. If there is any, take
    the one whose vector of edge variables comes first, in the order of the edges, among all
    images under the mirrors in use, repeated and combined as one likes. No mirror maps it to
    an earlier one. The clauses of a mirror say so, place by place; MirrorSound.v proves it. *)

From Coq Require Import Bool List PArith Arith FMapPositive.
From Certify Require Import Statement Question Sets Propagation Variables.
Import ListNotations.

(** The first [k], or all if there are fewer. *)
Fixpoint take {A : Type} (k : positive) (l : list A) : list A :=
  match l with
  | [] => []
  | d :: rest => d :: (if (k =? 1)%positive then [] else take (Pos.pred k) rest)
  end.

(** The vector of the first variables is no later than that of the second ones, if the
    clause [before] fails; it says that they were not equal so far. *)
Fixpoint no_later (before : clause) (places : list (variable * variable))
    (next : variable) : formula :=
  match places with
  | [] => ([], next)
  | [(x, y)] => ([before ++ [x~1; y~0]], next)
  | (x, y) :: rest =>
      let more := no_later [next~1] rest (Pos.succ next) in
      ([before ++ [x~1; y~0]; before ++ [x~1; next~0]; before ++ [y~0; next~0]] ++ fst more,
       snd more)
  end%positive.

(** A mirror as a map, and the other way round. *)
Record mirror := { forth : PositiveMap.t vertex; back : PositiveMap.t vertex }.

Definition read_mirror (image : list vertex) : mirror :=
  {| forth := by_place 1 image;
     back := fold_right (fun e => PositiveMap.add (snd e) (fst e)) (PositiveMap.empty vertex)
               (number 1 image) |}.

(** The image of a vertex; there is one, as a mirror is as long as the question. *)
Definition apply (m : PositiveMap.t vertex) (v : vertex) : vertex :=
  match PositiveMap.find v m with Some w => w | None => v end.

Section Mirror.

Variable Q : question.

Definition is_needed (u v : vertex) : bool := existsb (pair_eqb (u, v)) (needed Q).

Definition permutes (p : mirror) : bool :=
  forallb (fun v => let w := apply (forth p) v in
                    (w <=? last_vertex Q)%positive && (apply (back p) w =? v)%positive)
    (count_up (order Q) 1%positive).

Definition keeps_needed (p : mirror) : bool :=
  forallb (fun '(u, v) => let x := apply (back p) u in
                          let y := apply (back p) v in
                          (is_needed x y || is_needed y x)
                          && (apply (forth p) x =? u)%positive
                          && (apply (forth p) y =? v)%positive)
    (needed Q).

(** The variable of the image of an edge. *)
Definition image_of (near : neighbourhoods) (p : mirror) (e : vertex * vertex)
    : option variable :=
  variable_of near (apply (forth p) (fst e)) (apply (forth p) (snd e)).

Definition keeps_edges (near : neighbourhoods) (p : mirror) : bool :=
  forallb (fun e => match image_of near p e with Some _ => true | None => false end) (edges Q).

(** For each variable that of the edge which the mirror maps to its edge. *)
Definition sources (near : neighbourhoods) (p : mirror) (l : list (variable * (vertex * vertex)))
    : PositiveMap.t variable :=
  fold_right (fun '(i, e) m => match image_of near p e with
                               | Some j => PositiveMap.add j i m
                               | None => m
                               end) (PositiveMap.empty _) l.

(** The variables of the edges that the mirror moves, each with that of its source. *)
Fixpoint moved (source : PositiveMap.t variable) (l : list (variable * (vertex * vertex)))
    : option (list (variable * variable)) :=
  match l with
  | [] => Some []
  | (x, _) :: rest =>
      match PositiveMap.find x source, moved source rest with
      | Some y, Some places => Some (if (x =? y)%positive then places else (x, y) :: places)
      | _, _ => None
      end
  end.

Definition mirror_fine (near : neighbourhoods) (p : mirror) : bool :=
  permutes p && keeps_edges near p && keeps_needed p.

Definition mirror_clauses (near : neighbourhoods) (k : positive) (image : list vertex)
    (next : variable) : option formula :=
  let p := read_mirror image in
  if (length image =? order Q) && mirror_fine near p then
    option_map (fun places => no_later [] (take k places) next)
      (moved (sources near p (numbered_edges Q)) (numbered_edges Q))
  else None.

End Mirror.
